import { Loading } from "@/ui/primitives/states";

export default function ScreenLoading() {
  return <Loading title="Ranking the junctions" />;
}
