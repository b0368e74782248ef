"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { ROLES, type Role } from "@/domain/actor";
import type { PersonState, PersonView } from "@/domain/people";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { Button } from "@/ui/primitives/button";
import { Select } from "@/ui/primitives/field";
import { STAYS, Td } from "@/ui/primitives/table";
import type { PeopleActions } from "./people-actions";

const STATE_NAMES: Record<PersonState, string> = {
  active: "active",
  invited: "invited, no password yet",
  disabled: "disabled",
};

export function PersonRow({ person, actions }: { person: PersonView; actions: PeopleActions }) {
  const router = useRouter();
  const [role, setRole] = useState<Role>(person.role);
  const [done, setDone] = useState<string | null>(null);
  const changeRole = useAction(actions.changeRole);
  const disable = useAction(actions.disable);
  const enable = useAction(actions.enable);
  const resend = useAction(actions.resend);
  const all = [changeRole, disable, enable, resend];
  const isBusy = all.some((action) => action.isBusy);
  const problem = all.find((action) => action.problem)?.problem ?? null;
  const { userId } = person;

  async function act(pending: Promise<{ data: unknown } | null>, sentence: string) {
    all.forEach((action) => action.setProblem(null));
    setDone(null);
    if (!(await pending)) return;
    setDone(sentence);
    router.refresh();
  }

  return (
    <tr className={person.state === "disabled" ? "text-ink-soft" : undefined}>
      <Td className={STAYS}>
        <span className="font-semibold">{person.name}</span>
        {person.isSelf ? " (you)" : ""}
      </Td>
      <Td className="break-all">{person.email}</Td>
      <Td>
        {person.isSelf ? (
          person.role
        ) : (
          <span className="flex items-center gap-2">
            <Select aria-label={`Role of ${person.name}`} className="w-36" value={role} disabled={isBusy} onChange={(event) => setRole(event.target.value as Role)}>
              {ROLES.map((choice) => (
                <option key={choice}>{choice}</option>
              ))}
            </Select>
            {role === person.role ? null : (
              <Button tone="strong" disabled={isBusy} onClick={() => act(changeRole.run({ userId, role }), `${person.name} is ${role} now.`)}>
                Save role
              </Button>
            )}
          </span>
        )}
      </Td>
      <Td>{STATE_NAMES[person.state]}</Td>
      <Td>
        {person.isSelf ? null : (
          <span className="flex flex-wrap gap-2">
            {person.state === "disabled" ? (
              <Button disabled={isBusy} onClick={() => act(enable.run({ userId }), `${person.name} can sign in again.`)}>
                Enable
              </Button>
            ) : (
              <>
                <Button disabled={isBusy} onClick={() => act(resend.run({ userId }), `A mail goes to ${person.email}.`)}>
                  {person.state === "invited" ? "Send invitation again" : "Send password link"}
                </Button>
                <Button disabled={isBusy} onClick={() => act(disable.run({ userId }), `${person.name} can no longer sign in.`)}>
                  Disable
                </Button>
              </>
            )}
          </span>
        )}
        <FormProblem problem={problem} />
        <span role="status" className={done ? "mt-1 block text-sm" : "sr-only"}>
          {done ?? ""}
        </span>
      </Td>
    </tr>
  );
}

