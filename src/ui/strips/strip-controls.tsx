"use client";

import { useId } from "react";
import { CELL_SECONDS, drawableCellS } from "@/core/strips/cell-width";
import { TURNS } from "@/core/types";
import type { LegStripView, StripQuery } from "@/domain/junction";
import { counted, formatLength } from "@/ui/format";
import { ChoiceList } from "@/ui/primitives/choice";
import { Field, Select } from "@/ui/primitives/field";
import { SentenceControl } from "@/ui/primitives/sentence";
import { useCity } from "@/ui/shell/city";
import { CELL_METRES, windowOfView } from "./strip-picture";
import { cellSecondsPhrase, cellsPhrase, MOVEMENT_PHRASES, shapePhrase, SMOOTH_PHRASES, TYPICAL_DAY, wavePhrase, weekdayPhrase } from "./strip-phrases";

interface ControlProps {
  query: StripQuery;
  view: LegStripView;
  onChange: (part: Partial<StripQuery>) => void;
}

const TYPICAL = "typical";

export function DayControl({ query, view, onChange }: ControlProps) {
  const { locale } = useCity();
  const days = view.days.map(({ date, tracks }) => ({ value: date, label: weekdayPhrase(date, locale), note: `${counted(tracks, "vehicle", "vehicles", locale)} that day` }));
  const pooled = { value: TYPICAL, label: TYPICAL_DAY, note: `${counted(view.days.length, "day", "days", locale)} together` };
  return (
    <SentenceControl name="Day" phrase={query.day === undefined ? TYPICAL_DAY : weekdayPhrase(query.day, locale)}>
      {(close) => (
        <ChoiceList
          legend="All days together, or one"
          choices={[pooled, ...days]}
          value={query.day ?? TYPICAL}
          onChoose={(value) => onChange({ day: value === TYPICAL ? undefined : value })}
          onSettle={close}
        />
      )}
    </SentenceControl>
  );
}

export function MovementsControl({ query, view, onChange }: ControlProps) {
  const { locale } = useCity();
  const seen = TURNS.filter((turn) => turn === query.turn || view.movements.some((movement) => movement.turn === turn));
  const vehiclesOf = (turn: string) => view.movements.filter((movement) => movement.turn === turn).reduce((sum, movement) => sum + movement.vehicles, 0);
  const choices = seen.map((turn) => ({ value: turn, label: MOVEMENT_PHRASES[turn], note: vehiclesOf(turn) > 0 ? counted(vehiclesOf(turn), "vehicle", "vehicles", locale) : undefined }));
  return (
    <SentenceControl name="Movements" phrase={MOVEMENT_PHRASES[query.turn]}>
      {(close) => (
        <ChoiceList
          legend="Vehicles that are shown"
          choices={[{ value: "any", label: MOVEMENT_PHRASES.any }, ...choices]}
          value={query.turn}
          onChoose={(turn) => onChange({ turn })}
          onSettle={close}
        >
          <p className="mt-2 max-w-56 text-sm text-ink-soft">The tail line always goes by all vehicles: a queue holds every movement.</p>
        </ChoiceList>
      )}
    </SentenceControl>
  );
}

export function CellsControl({ query, view, onChange }: ControlProps) {
  const { settings, locale } = useCity();
  const window = windowOfView(view);
  const cellS = drawableCellS(query.cellS, window);
  const seconds = withChosen(CELL_SECONDS.filter((choice) => drawableCellS(choice, window) === choice), cellS);
  const metres = withChosen(CELL_METRES, query.cellM);
  return (
    <SentenceControl name="Cells" phrase={cellsPhrase(query.cellM, cellS, settings.units, locale)}>
      {() => (
        <div className="grid w-64 max-w-full grid-cols-2 gap-3">
          <Field label="Along the leg">
            {(told) => (
              <Select {...told} value={query.cellM} onChange={(event) => onChange({ cellM: Number(event.target.value) })}>
                {metres.map((choice) => (
                  <option key={choice} value={choice}>
                    {formatLength(choice, settings.units, locale)}
                  </option>
                ))}
              </Select>
            )}
          </Field>
          <Field label="In time">
            {(told) => (
              <Select {...told} value={cellS} onChange={(event) => onChange({ cellS: Number(event.target.value) })}>
                {seconds.map((choice) => (
                  <option key={choice} value={choice}>
                    {cellSecondsPhrase(choice)}
                  </option>
                ))}
              </Select>
            )}
          </Field>
        </div>
      )}
    </SentenceControl>
  );
}

function withChosen(choices: readonly number[], chosen: number): number[] {
  return [...new Set([...choices, chosen])].sort((a, b) => a - b);
}

export function ShapeControl({ query, onChange }: ControlProps) {
  const { settings } = useCity();
  const id = useId();
  const phrase = wavePhrase(query.wave, settings.units);
  return (
    <SentenceControl name="Shape of the cells" phrase={shapePhrase(query, settings.units)}>
      {() => (
        <ChoiceList
          legend="Shape of the cells"
          choices={[
            { value: "rectangles", label: "upright", note: "rectangles" },
            { value: "waves", label: "along the backward wave", note: "leaning" },
          ]}
          value={query.shape}
          onChoose={(shape) => onChange({ shape })}
        >
          <div className="mt-3 flex w-72 max-w-full flex-col gap-1 border-t border-rule pt-3">
            <label htmlFor={id} className="text-sm text-ink-soft">
              A queue starts off from its head backwards at <span className="font-medium text-ink">{phrase}</span>
            </label>
            <input
              id={id}
              type="range"
              className="slider"
              min={10}
              max={20}
              step={0.5}
              value={query.wave}
              aria-valuetext={phrase}
              onChange={(event) => onChange({ wave: Number(event.target.value), shape: "waves" })}
            />
          </div>
        </ChoiceList>
      )}
    </SentenceControl>
  );
}

export function SmoothControl({ query, onChange }: ControlProps) {
  return (
    <SentenceControl name="Smoothing" phrase={SMOOTH_PHRASES[query.smooth]}>
      {(close) => (
        <ChoiceList
          legend="Speed of a cell"
          choices={[
            { value: "off", label: SMOOTH_PHRASES.off, note: "its own vehicles only" },
            { value: "on", label: SMOOTH_PHRASES.on, note: "with neighbours along both waves" },
          ]}
          value={query.smooth}
          onChoose={(smooth) => onChange({ smooth })}
          onSettle={close}
        />
      )}
    </SentenceControl>
  );
}

export function PathsControl({ query, onChange }: ControlProps) {
  return (
    <SentenceControl name="Vehicle paths" phrase={query.paths}>
      {(close) => (
        <ChoiceList
          legend="Paths of the vehicles seen"
          choices={[
            { value: "hidden", label: "hidden" },
            { value: "shown", label: "shown" },
          ]}
          value={query.paths}
          onChoose={(paths) => onChange({ paths })}
          onSettle={close}
        />
      )}
    </SentenceControl>
  );
}
