"use client";

import { useRouter } from "next/navigation";
import { RequestError } from "@/ui/query-client";
import { Failed } from "./states";

/** A request failed: says so in the server's words, and leads back in when the session has ended. */
export function RequestFailed({ title, error, onRetry }: { title?: string; error: Error; onRetry: () => void }) {
  const router = useRouter();
  if (!(error instanceof RequestError && error.status === 401)) return <Failed title={title} message={error.message} onRetry={onRetry} />;
  return (
    <Failed title="Your session has ended." message="Sign in again; the address keeps what you were looking at.">
      <button
        type="button"
        className="text-link text-ink"
        onClick={() => router.push(`/sign-in?next=${encodeURIComponent(window.location.pathname + window.location.search)}`)}
      >
        To the sign-in
      </button>
    </Failed>
  );
}
