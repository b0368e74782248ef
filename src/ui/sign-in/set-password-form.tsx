"use client";

import Link from "next/link";
import { useState, type FormEvent } from "react";
import type { ActionResult } from "@/domain/errors";
import { PASSWORD_MIN, type SetPassword } from "@/domain/people";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { useIsReady } from "@/ui/forms/use-is-ready";
import { Button } from "@/ui/primitives/button";
import { Field, Input } from "@/ui/primitives/field";

export interface SetPasswordFormProps {
  token: string;
  set: (input: SetPassword) => Promise<ActionResult<{ email: string }>>;
}

export function SetPasswordForm({ token, set }: SetPasswordFormProps) {
  const isReady = useIsReady();
  const action = useAction(set);
  const [email, setEmail] = useState<string | null>(null);
  const wrong = action.problem?.fieldErrors;

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const done = await action.run({ token, password: String(form.get("password")), repeated: String(form.get("repeated")) });
    if (done) setEmail(done.data.email);
  }

  if (email !== null) {
    return (
      <div role="status" className="flex flex-col gap-4">
        <p>The password of {email} is set. Sign in with it now.</p>
        <Link href="/sign-in" className="text-link">
          To the sign-in
        </Link>
      </div>
    );
  }
  return (
    <form method="post" onSubmit={submit} className="flex flex-col gap-4">
      <FormProblem problem={action.problem} />
      <Field label="New password" hint={`At least ${PASSWORD_MIN} characters; a few words in a row do well.`} error={wrong?.password}>
        {(told) => <Input {...told} name="password" type="password" autoComplete="new-password" minLength={PASSWORD_MIN} required />}
      </Field>
      <Field label="The same again" error={wrong?.repeated}>
        {(told) => <Input {...told} name="repeated" type="password" autoComplete="new-password" required />}
      </Field>
      <Button type="submit" tone="strong" className="self-start" disabled={!isReady || action.isBusy}>
        {action.isBusy ? "Setting…" : "Set the password"}
      </Button>
    </form>
  );
}
