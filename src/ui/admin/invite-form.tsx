"use client";

import { useRouter } from "next/navigation";
import { useState, type FormEvent } from "react";
import { ROLES, type Role } from "@/domain/actor";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { useIsReady } from "@/ui/forms/use-is-ready";
import { Button } from "@/ui/primitives/button";
import { Field, Input, Select } from "@/ui/primitives/field";
import type { PeopleActions } from "./people-actions";

export const ROLE_NOTES: Record<Role, string> = {
  engineer: "screens the city, loads data, studies junctions",
  technician: "reads junctions and strips for a visit",
  reader: "reads published reports, nothing else",
  admin: "people and settings; reads everything",
};

export function InviteForm({ invite }: { invite: PeopleActions["invite"] }) {
  const router = useRouter();
  const isReady = useIsReady();
  const action = useAction(invite);
  const [role, setRole] = useState<Role>("engineer");
  const [invited, setInvited] = useState<string | null>(null);
  const wrong = action.problem?.fieldErrors;

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const element = event.currentTarget;
    const form = new FormData(element);
    const email = String(form.get("email"));
    setInvited(null);
    if (!(await action.run({ email, name: String(form.get("name")), role }))) return;
    element.reset();
    setInvited(email);
    router.refresh();
  }

  return (
    <form method="post" onSubmit={submit} aria-labelledby="invite-title" className="flex flex-col gap-3">
      <h2 id="invite-title" className="text-lg">
        Invite a person
      </h2>
      {wrong ? null : <FormProblem problem={action.problem} />}
      <div className="grid items-start gap-4 sm:grid-cols-2 lg:grid-cols-[1fr_1fr_18rem_auto]">
        <Field label="E-mail address" error={wrong?.email}>
          {(told) => <Input {...told} name="email" type="email" autoComplete="off" required />}
        </Field>
        <Field label="Name" error={wrong?.name}>
          {(told) => <Input {...told} name="name" autoComplete="off" maxLength={80} required />}
        </Field>
        <Field label="Role" hint={ROLE_NOTES[role]}>
          {(told) => (
            <Select {...told} name="role" value={role} onChange={(event) => setRole(event.target.value as Role)}>
              {ROLES.map((choice) => (
                <option key={choice}>{choice}</option>
              ))}
            </Select>
          )}
        </Field>
        <Button type="submit" tone="strong" className="lg:mt-6" disabled={!isReady || action.isBusy}>
          {action.isBusy ? "Inviting…" : "Invite"}
        </Button>
      </div>
      <p role="status" className={invited ? "text-sm" : "sr-only"}>
        {invited ? `A mail with a link to begin goes to ${invited}.` : ""}
      </p>
    </form>
  );
}
