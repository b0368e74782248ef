import { Loading } from "@/ui/primitives/states";

export default function JunctionLoading() {
  return <Loading title="Reading the junctions" />;
}
