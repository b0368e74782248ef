import { NoPermission } from "@/ui/primitives/states";

export default function DeskForbidden() {
  return (
    <>
      <h1 className="sr-only">No permission</h1>
      <NoPermission />
    </>
  );
}
