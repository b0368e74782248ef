import Link from "next/link";
import { Empty } from "@/ui/primitives/states";
import { Mark } from "@/ui/shell/mark";

export const metadata = { title: "Not found" };

export default function NotFound() {
  return (
    <main className="min-h-dvh bg-sheet">
      <p className="flex items-center gap-2 border-b border-ink bg-paper px-4 py-2.5 font-table text-[1.4rem] font-semibold leading-none sm:px-6">
        <Mark />
        Tailmark
      </p>
      <h1 className="sr-only">Not found</h1>
      <Empty title="There is nothing at this address.">
        <p>It may have been removed, or the address was cut short.</p>
        <Link href="/" className="text-link text-ink">
          To the start page
        </Link>
      </Empty>
    </main>
  );
}
