import { Loading } from "@/ui/primitives/states";

export default function DeskLoading() {
  return <Loading />;
}
