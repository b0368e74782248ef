import { Loading } from "@/ui/primitives/states";

export default function AdminLoading() {
  return <Loading title="Reading the records" />;
}
