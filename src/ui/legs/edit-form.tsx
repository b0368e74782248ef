"use client";

import { useState, type FormEvent } from "react";
import type { LegOfCheck } from "@/domain/leg-check";
import { formatLength, lengthFromMetres, lengthUnit, speedUnit } from "@/ui/format";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { Button } from "@/ui/primitives/button";
import { Field, Input } from "@/ui/primitives/field";
import { useCity } from "@/ui/shell/city";
import type { LegActions } from "./leg-actions";
import { changesOf, textsOf, typingFaults, type LegTexts } from "./leg-edit";
import { MOST_SHIFT_M } from "./leg-shape";
import { metresFromLength, typedNumber } from "./leg-units";
import { shiftWords } from "./stop-line-handle";

interface Props {
  leg: LegOfCheck;
  edit: LegActions["edit"];
  shiftM: number;
  /** Too little of the leg would remain. */
  isTooShort: boolean;
  onShift: (shiftM: number) => void;
  onSaved: () => Promise<void>;
}

/** Name, stop line, limits and lock of one leg. */
export function EditForm({ leg, edit, shiftM, isTooShort, onShift, onSaved }: Props) {
  const { settings, locale } = useCity();
  const { units } = settings;
  const [typed, setTyped] = useState<Partial<LegTexts>>({});
  const [note, setNote] = useState("");
  const texts: LegTexts = { ...textsOf(leg, units), ...typed };
  const [faults, setFaults] = useState<ReturnType<typeof typingFaults>>({});
  const { run, isBusy, problem, setProblem } = useAction(edit);
  const changes = changesOf(leg, texts, shiftM, units);
  const set = (part: Partial<LegTexts>) => {
    setTyped((before) => ({ ...before, ...part }));
    setProblem(null);
    setNote("");
  };
  const server = problem?.fieldErrors ?? {};

  async function save(event: FormEvent) {
    event.preventDefault();
    const found = typingFaults(texts);
    setFaults(found);
    if (isBusy || isTooShort || Object.keys(found).length > 0) return;
    if (!changes) return setNote("Nothing is changed yet.");
    setNote("");
    const done = await run(changes);
    if (!done) return;
    await onSaved();
    setTyped({});
    setNote(done.data.rematching ? "The leg is saved; the pings around the junction are being matched anew." : "The leg is saved.");
  }

  const number = (label: string, field: "speedLimit" | "storage" | "lanes", hint: string, error: string[] | undefined) => (
    <Field label={label} hint={hint} error={faults[field] ?? error}>
      {(told) => <Input {...told} inputMode="decimal" autoComplete="off" value={texts[field]} onChange={(event) => set({ [field]: event.target.value })} />}
    </Field>
  );

  return (
    <form onSubmit={save} noValidate className="flex flex-col gap-3.5" aria-label={`Change the leg ${leg.name}`}>
      <Field label="Name" error={faults.name ?? server.name}>
        {(told) => <Input {...told} value={texts.name} maxLength={80} autoComplete="off" onChange={(event) => set({ name: event.target.value })} />}
      </Field>
      <Field
        label={`Move the stop line, ${lengthUnit(units)}`}
        hint={shiftM === 0 ? "Upstream is positive; you can also drag it on the plan." : `It goes ${shiftWords(shiftM, (m) => formatLength(m, units, locale))}.`}
        error={isTooShort ? "Too little of the leg would remain." : server.stopLineShiftM}
      >
        {(told) => <ShiftInput {...told} shiftM={shiftM} onShift={onShift} />}
      </Field>
      <div className="grid grid-cols-[repeat(auto-fit,minmax(7.5rem,1fr))] items-start gap-3">
        {number(`Speed limit, ${speedUnit(units)}`, "speedLimit", "Empty: unknown.", server.speedLimitKmh)}
        {number(`Storage, ${lengthUnit(units)}`, "storage", "Empty: from the street.", server.storageM)}
        {number("Lanes", "lanes", "Empty: unknown.", server.lanes)}
      </div>
      <label className="flex items-baseline gap-2.5">
        <input type="checkbox" className="relative top-0.5 size-4 shrink-0 accent-pick" checked={texts.locked} onChange={(event) => set({ locked: event.target.checked })} />
        <span>
          Locked
          <span className="block text-sm text-ink-soft">New files leave the leg as it is. A leg that you change is locked with the change.</span>
        </span>
      </label>
      <FormProblem problem={problem?.fieldErrors ? { ...problem, message: "Check the marked fields." } : problem} />
      <div className="flex flex-wrap items-center gap-4">
        {/* Not disabled while it works: it would lose the focus. */}
        <Button type="submit" tone="strong" aria-disabled={isBusy || isTooShort}>
          {isBusy ? "Saving…" : "Save the leg"}
        </Button>
        <p role="status" className="font-medium">
          {note}
        </p>
      </div>
    </form>
  );
}

/** Whole units of the city; what is dragged on the plan shows here. */
function ShiftInput({ shiftM, onShift, ...told }: { shiftM: number; onShift: (shiftM: number) => void; id: string }) {
  const { settings } = useCity();
  const shown = String(Math.round(lengthFromMetres(shiftM, settings.units)));
  const [typed, setTyped] = useState<{ text: string; shiftM: number } | null>(null);
  const most = Math.floor(lengthFromMetres(MOST_SHIFT_M, settings.units));
  return (
    <Input
      {...told}
      type="number"
      step={1}
      min={-most}
      max={most}
      className="max-w-32"
      value={typed?.shiftM === shiftM ? typed.text : shown}
      onChange={(event) => {
        const value = typedNumber(event.target.value) ?? 0;
        const next = Number.isNaN(value) ? 0 : Math.max(-MOST_SHIFT_M, Math.min(MOST_SHIFT_M, metresFromLength(value, settings.units)));
        setTyped({ text: event.target.value, shiftM: next });
        onShift(next);
      }}
    />
  );
}
