import Link from "next/link";
import { NoPermission } from "@/ui/primitives/states";

export default function Forbidden() {
  return (
    <main className="min-h-dvh bg-sheet">
      <h1 className="sr-only">No permission</h1>
      <NoPermission>
        <p>Ask an administrator if you need it for your work.</p>
        <Link href="/" className="text-link text-ink">
          To the start page
        </Link>
      </NoPermission>
    </main>
  );
}
