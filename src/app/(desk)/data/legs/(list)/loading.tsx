import { Loading } from "@/ui/primitives/states";

export default function LegsLoading() {
  return <Loading title="Reading the legs" />;
}
