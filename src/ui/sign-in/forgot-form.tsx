"use client";

import Link from "next/link";
import { useState, type FormEvent } from "react";
import type { AskForReset } from "@/domain/people";
import type { ActionResult } from "@/domain/errors";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { useIsReady } from "@/ui/forms/use-is-ready";
import { Button } from "@/ui/primitives/button";
import { Field, Input } from "@/ui/primitives/field";

export function ForgotForm({ ask }: { ask: (input: AskForReset) => Promise<ActionResult<void>> }) {
  const isReady = useIsReady();
  const action = useAction(ask);
  const [askedFor, setAskedFor] = useState<string | null>(null);

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const email = String(new FormData(event.currentTarget).get("email"));
    if (await action.run({ email })) setAskedFor(email);
  }

  if (askedFor !== null) {
    return (
      <div role="status" className="flex flex-col gap-4">
        <p>If {askedFor} has an account here, a mail with a link is on its way. The link works once, within an hour.</p>
        <Link href="/sign-in" className="text-link">
          Back to the sign-in
        </Link>
      </div>
    );
  }
  return (
    <form method="post" onSubmit={submit} className="flex flex-col gap-4">
      <FormProblem problem={action.problem} />
      <Field label="E-mail address" hint="The link to choose a new password goes there." error={action.problem?.fieldErrors?.email}>
        {(told) => <Input {...told} name="email" type="email" autoComplete="username" required />}
      </Field>
      <div className="flex flex-wrap items-center justify-between gap-3">
        <Button type="submit" tone="strong" disabled={!isReady || action.isBusy}>
          {action.isBusy ? "Sending…" : "Send the link"}
        </Button>
        <Link href="/sign-in" className="text-link text-sm">
          Back to the sign-in
        </Link>
      </div>
    </form>
  );
}
