"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import type { FeedTokenView } from "@/domain/feed";
import { formatInstant } from "@/ui/format";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { Button } from "@/ui/primitives/button";
import { useCity } from "@/ui/shell/city";
import type { RevokeAction } from "./feeds-panel";

/** One token: whose it is, when it was last shown, and the way to end it, which is asked for twice. */
export function FeedRow({ token, revoke }: { token: FeedTokenView; revoke: RevokeAction }) {
  const router = useRouter();
  const action = useAction(revoke);
  const [isAsked, setAsked] = useState(false);

  async function end() {
    if (await action.run({ id: token.id })) router.refresh();
    setAsked(false);
  }

  return (
    <li className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 border-b border-rule py-2">
      <div>
        <span className="font-medium">{token.supplier}</span>
        <TokenWords token={token} />
      </div>
      {token.revokedAt === null ? (
        <div role="group" aria-label={`Token of ${token.supplier}`} className="flex flex-wrap gap-2">
          {isAsked ? (
            <>
              <Button autoFocus tone="strong" disabled={action.isBusy} onClick={() => void end()}>
                Yes, revoke
              </Button>
              <Button disabled={action.isBusy} onClick={() => setAsked(false)}>
                Keep it
              </Button>
            </>
          ) : (
            <Button onClick={() => setAsked(true)}>Revoke</Button>
          )}
        </div>
      ) : null}
      <FormProblem problem={action.problem} />
    </li>
  );
}

function TokenWords({ token }: { token: FeedTokenView }) {
  const { locale, settings } = useCity();
  const instant = (iso: string) => formatInstant(iso, locale, settings.timeZone);
  const use = token.lastUsedAt === null ? "never used" : `last used ${instant(token.lastUsedAt)}`;
  const made = `made ${instant(token.createdAt)}${token.by ? ` by ${token.by}` : ""}`;
  return (
    <span className="block text-sm text-ink-soft">
      {token.revokedAt === null ? `${made}, ${use}` : `revoked ${instant(token.revokedAt)}, ${use}`}
    </span>
  );
}
