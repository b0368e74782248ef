"use client";

import { useEffect, useRef, useState, type FormEvent } from "react";
import { counted, lengthUnit } from "@/ui/format";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import type { Problem } from "@/domain/errors";
import type { LegCheckView } from "@/domain/leg-check";
import { Button } from "@/ui/primitives/button";
import { Field, Input } from "@/ui/primitives/field";
import { useCity } from "@/ui/shell/city";
import type { LegActions } from "./leg-actions";
import { pointAlong } from "./leg-shape";
import { metresFromLength, typedNumber } from "./leg-units";
import type { Drawing, DrawingControls } from "./use-drawing";

interface Props {
  view: LegCheckView;
  drawing: Drawing;
  controls: DrawingControls;
  actions: Pick<LegActions, "add" | "split">;
  /** The leg that is to be shown afterwards. */
  onSaved: (legId: number) => Promise<void>;
}

/** Draws the line of a new leg, or the two lines that a leg is split into: by clicks on the plan or by bearing and length. */
export function DrawForm({ view, drawing, controls, actions, onSaved }: Props) {
  const [name, setName] = useState("");
  const add = useAction(actions.add);
  const split = useAction(actions.split);
  const heading = useRef<HTMLHeadingElement>(null);
  // The button that led here is gone.
  useEffect(() => heading.current?.focus(), []);
  const { lines, active } = controls;
  const isBusy = add.isBusy || split.isBusy;
  const isReady = lines.every((line) => line.length >= 2) && (drawing.kind === "split" || name.trim() !== "");
  const problem: Problem | null = add.problem ?? split.problem;
  const leg = drawing.kind === "split" ? view.legs.find((one) => one.id === drawing.legId) : undefined;

  async function save(event: FormEvent) {
    event.preventDefault();
    if (!isReady) return;
    if (drawing.kind === "add") {
      const done = await add.run({ junctionId: view.junction.id, name, line: lines[0] });
      if (done) await onSaved(done.data.legId);
      return;
    }
    if (await split.run({ legId: drawing.legId, first: lines[0], second: lines[1] })) await onSaved(drawing.legId);
  }

  return (
    <form onSubmit={save} noValidate className="flex flex-col gap-4" aria-label={drawing.kind === "add" ? "Add a leg" : "Split the leg"}>
      <h2 ref={heading} tabIndex={-1} className="text-lg outline-none">{drawing.kind === "add" ? "Add a leg" : `Split the leg ${leg?.name ?? ""}`}</h2>
      <p>
        Click on the plan from the stop line upstream: the first point is the middle of the stop line, each next one lies farther back on the street.
        {drawing.kind === "split" ? " The first line keeps the leg's name and history, the second becomes a leg of its own." : ""}
      </p>
      {drawing.kind === "add" ? (
        <Field label="Name" hint="Such as: from the mill, eastbound">
          {(told) => <Input {...told} value={name} maxLength={80} autoComplete="off" onChange={(event) => setName(event.target.value)} />}
        </Field>
      ) : (
        <LineChoice lines={lines} active={active} onChoose={controls.choose} />
      )}
      <StretchFields controls={controls} />
      <FormProblem problem={problem} />
      <div className="flex flex-wrap gap-3">
        <Button type="submit" tone="strong" disabled={isBusy || !isReady}>
          {isBusy ? "Saving…" : drawing.kind === "add" ? "Add the leg" : "Split the leg"}
        </Button>
        <Button onClick={controls.end} disabled={isBusy}>
          Leave as it was
        </Button>
        {drawing.kind === "add" && name.trim() === "" ? <p className="self-center text-sm text-ink-soft">Still needed: a name.</p> : null}
      </div>
    </form>
  );
}

function LineChoice({ lines, active, onChoose }: { lines: DrawingControls["lines"]; active: number; onChoose: (line: number) => void }) {
  const { locale } = useCity();
  return (
    <fieldset>
      <legend className="text-sm font-medium">Points go to</legend>
      {lines.map((line, i) => (
        <label key={i} className="flex min-h-8 items-center gap-2.5">
          <input type="radio" name="line" checked={i === active} onChange={() => onChoose(i)} className="size-4 accent-pick" />
          {i === 0 ? "the first line" : "the second line"}
          <span className="text-sm text-ink-soft">{counted(line.length, "point", "points", locale)}</span>
        </label>
      ))}
    </fieldset>
  );
}

/** The way without a pointer: each point by bearing and length from the one before. */
function StretchFields({ controls }: { controls: DrawingControls }) {
  const { settings, locale } = useCity();
  const [bearing, setBearing] = useState("");
  const [length, setLength] = useState("");
  const line = controls.lines[controls.active] ?? [];
  const [bearingDeg, lengthInUnit] = [typedNumber(bearing), typedNumber(length)];
  const isWhole = bearingDeg !== null && bearingDeg >= 0 && bearingDeg <= 360 && lengthInUnit !== null && lengthInUnit > 0;

  return (
    <fieldset className="flex flex-col gap-2 border-t border-rule pt-3">
      <legend className="sr-only">Next point by bearing and length</legend>
      <p className="text-sm text-ink-soft">
        Or type the next point, measured from {line.length === 0 ? "the junction: this is the stop line" : "the point before"}.
      </p>
      <div className="grid grid-cols-2 gap-3">
        <Field label="Bearing, ° from north">
          {(told) => <Input {...told} inputMode="decimal" autoComplete="off" value={bearing} onChange={(event) => setBearing(event.target.value)} />}
        </Field>
        <Field label={`Length, ${lengthUnit(settings.units)}`}>
          {(told) => <Input {...told} inputMode="decimal" autoComplete="off" value={length} onChange={(event) => setLength(event.target.value)} />}
        </Field>
      </div>
      <div className="flex flex-wrap items-center gap-3">
        <Button disabled={!isWhole} onClick={() => controls.addPoint(pointAlong(line, bearingDeg ?? 0, metresFromLength(lengthInUnit ?? 0, settings.units)))}>
          Add the point
        </Button>
        <Button disabled={line.length === 0} onClick={controls.dropPoint}>
          Take the last point back
        </Button>
        <span role="status" className="text-sm text-ink-soft">
          {counted(line.length, "point", "points", locale)} drawn
        </span>
      </div>
    </fieldset>
  );
}
