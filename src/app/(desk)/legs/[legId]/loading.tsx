import { Loading } from "@/ui/primitives/states";

export default function LegLoading() {
  return <Loading title="Reading the leg" />;
}
