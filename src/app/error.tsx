"use client";

import { Failed } from "@/ui/primitives/states";

export default function RootError({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  return (
    <main className="min-h-dvh bg-sheet">
      <h1 className="sr-only">Something failed</h1>
      <Failed message={`The server could not answer.${error.digest ? ` Reference ${error.digest}.` : ""}`} onRetry={reset} />
    </main>
  );
}
