"use client";

import Link from "next/link";
import { signIn } from "next-auth/react";
import { useState, type FormEvent } from "react";
import type { Problem } from "@/domain/errors";
import { FormProblem } from "@/ui/forms/form-problem";
import { useIsReady } from "@/ui/forms/use-is-ready";
import { Button } from "@/ui/primitives/button";
import { Field, Input } from "@/ui/primitives/field";

const REFUSED = "That did not work. Check e-mail address and password; after several failures, wait a quarter of an hour.";
const UNREACHED = "The server could not be reached. Check the connection and try again.";

export function SignInForm({ next }: { next: string }) {
  const isReady = useIsReady();
  const [isBusy, setBusy] = useState(false);
  const [problem, setProblem] = useState<Problem | null>(null);

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    setBusy(true);
    setProblem(null);
    try {
      const answer = await signIn("credentials", { email: form.get("email"), password: form.get("password"), redirect: false });
      if (answer?.ok && !answer.error) {
        // A full load, so that nothing of a person who was signed in before stays in memory.
        window.location.assign(next);
        return;
      }
      // Not "unauthenticated": what helps is on this page.
      setProblem({ code: "invalid", message: REFUSED });
    } catch {
      setProblem({ code: "internal", message: UNREACHED });
    }
    setBusy(false);
  }

  return (
    <form method="post" onSubmit={submit} className="flex flex-col gap-4">
      <FormProblem problem={problem} />
      <Field label="E-mail address">{(told) => <Input {...told} name="email" type="email" autoComplete="username" required autoFocus />}</Field>
      <Field label="Password">{(told) => <Input {...told} name="password" type="password" autoComplete="current-password" required />}</Field>
      <div className="flex flex-wrap items-center justify-between gap-3">
        <Button type="submit" tone="strong" disabled={!isReady || isBusy}>
          {isBusy ? "Signing in…" : "Sign in"}
        </Button>
        <Link href="/forgot" className="text-link text-sm">
          Forgotten the password?
        </Link>
      </div>
    </form>
  );
}
