import { Empty } from "@/ui/primitives/states";

/** Something that a page of the desk asked for does not exist; the header stays. */
export default function DeskNotFound() {
  return (
    <>
      <h1 className="sr-only">Not found</h1>
      <Empty title="There is nothing at this address.">
        <p>It may have been removed, or the address was cut short.</p>
      </Empty>
    </>
  );
}
