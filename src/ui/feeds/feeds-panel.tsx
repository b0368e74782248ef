"use client";

import { useRouter } from "next/navigation";
import { useState, type FormEvent } from "react";
import type { ActionResult } from "@/domain/errors";
import type { FeedTokenView, MakeFeedToken } from "@/domain/feed";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { useIsReady } from "@/ui/forms/use-is-ready";
import { Button } from "@/ui/primitives/button";
import { Field, Input } from "@/ui/primitives/field";
import { FeedRow } from "./feed-row";

export type MakeAction = (input: MakeFeedToken) => Promise<ActionResult<{ id: string; token: string }>>;
export type RevokeAction = (input: { id: string }) => Promise<ActionResult<{ id: string }>>;

/** Suppliers' machines that send pings as they come, and what opens the door to each. */
export function FeedsPanel({ tokens, make, revoke }: { tokens: FeedTokenView[]; make: MakeAction; revoke: RevokeAction }) {
  return (
    <div className="flex max-w-xl flex-col gap-4">
      <p>
        A supplier&apos;s machine can send pings every few minutes instead of files, with a token of its own.{" "}
        <a className="text-link" href="/api/v1/openapi.json">
          How it is done
        </a>
        , as an OpenAPI document.
      </p>
      {tokens.length > 0 ? (
        <ul aria-label="Tokens of feeds" className="border-t border-rule">
          {tokens.map((token) => (
            <FeedRow key={token.id} token={token} revoke={revoke} />
          ))}
        </ul>
      ) : (
        <p className="text-ink-soft">No feed has a token yet.</p>
      )}
      <MakeForm make={make} />
    </div>
  );
}

function MakeForm({ make }: { make: MakeAction }) {
  const router = useRouter();
  const isReady = useIsReady();
  const action = useAction(make);
  const [made, setMade] = useState<{ supplier: string; token: string } | null>(null);
  const wrong = action.problem?.fieldErrors?.supplier;

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = event.currentTarget;
    const supplier = String(new FormData(form).get("supplier"));
    const outcome = await action.run({ supplier });
    if (!outcome) return;
    form.reset();
    setMade({ supplier, token: outcome.data.token });
    router.refresh();
  }

  return (
    <form method="post" onSubmit={submit} className="flex flex-col gap-3">
      {wrong ? null : <FormProblem problem={action.problem} />}
      <div className="flex flex-wrap items-start gap-3">
        <Field label="Supplier of the feed" error={wrong} className="min-w-52 flex-1">
          {(told) => <Input {...told} name="supplier" autoComplete="off" maxLength={80} required />}
        </Field>
        <Button type="submit" className="mt-6" disabled={!isReady || action.isBusy}>
          {action.isBusy ? "Making…" : "Make a token"}
        </Button>
      </div>
      <div role="status">
        {made ? (
          <>
            <p>
              The token for {made.supplier}. It is shown this once: hand it over by a safe way.
            </p>
            <code className="mt-1 block select-all break-all border border-rule bg-sheet px-2.5 py-1.5">{made.token}</code>
          </>
        ) : null}
      </div>
    </form>
  );
}
