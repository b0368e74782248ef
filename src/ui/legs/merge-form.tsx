"use client";

import { useState, type FormEvent } from "react";
import type { LegOfCheck } from "@/domain/leg-check";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { Button } from "@/ui/primitives/button";
import { Field, Select } from "@/ui/primitives/field";
import type { LegActions } from "./leg-actions";

/** Two legs that are one street in truth: the other one goes, its vehicles are matched to this one. */
export function MergeForm({ leg, others, merge, onSaved }: { leg: LegOfCheck; others: LegOfCheck[]; merge: LegActions["merge"]; onSaved: () => Promise<void> }) {
  const [dropId, setDropId] = useState("");
  const { run, isBusy, problem } = useAction(merge);
  const dropped = others.find((other) => String(other.id) === dropId);

  async function save(event: FormEvent) {
    event.preventDefault();
    if (!dropped || isBusy || !(await run({ keepId: leg.id, dropId: dropped.id }))) return;
    await onSaved();
    setDropId("");
  }

  return (
    <form onSubmit={save} className="flex flex-col gap-3" aria-label="Merge two legs">
      <Field label="The same street as" hint={dropped ? `The leg ${dropped.name} goes; its vehicles count for ${leg.name}.` : "Choose the leg that goes."}>
        {(told) => (
          <Select {...told} value={dropId} onChange={(event) => setDropId(event.target.value)}>
            <option value="">no other leg</option>
            {others.map((other) => (
              <option key={other.id} value={other.id}>
                {other.name}
              </option>
            ))}
          </Select>
        )}
      </Field>
      <FormProblem problem={problem} />
      <Button type="submit" className="self-start" aria-disabled={isBusy || !dropped}>
        {isBusy ? "Merging…" : "Merge the legs"}
      </Button>
    </form>
  );
}
