"use client";

import { Failed } from "@/ui/primitives/states";

/** A page of the desk failed: the header stays, so that the person can go elsewhere. */
export default function DeskError({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  return (
    <div className="bg-sheet">
      <h1 className="sr-only">Something failed</h1>
      <Failed message={`The server could not answer.${error.digest ? ` Reference ${error.digest}.` : ""}`} onRetry={reset} />
    </div>
  );
}
