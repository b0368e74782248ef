import { Loading } from "@/ui/primitives/states";

export default function DataLoading() {
  return <Loading title="Looking at what is there" />;
}
