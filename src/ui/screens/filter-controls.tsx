"use client";

import { useQuery } from "@tanstack/react-query";
import { TURNS } from "@/core/types";
import type { ScreenQuery } from "@/domain/screen";
import { EVIDENCE_FLOORS, SORT_KEYS } from "@/domain/screen-choices";
import { defaultDirection } from "@/domain/screen-filter";
import { ChoiceList } from "@/ui/primitives/choice";
import { SentenceControl } from "@/ui/primitives/sentence";
import { EVIDENCE_PHRASES, minDelayPhrase, minSpillPhrase, SORT_WORDS, TURN_PHRASES } from "./phrases";
import { corridorsQuery } from "./queries";
import { SliderControl } from "./slider-control";

export interface FilterControlProps {
  query: ScreenQuery;
  onChange: (part: Partial<ScreenQuery>) => void;
}

export function MovementControl({ query, onChange }: FilterControlProps) {
  return (
    <SentenceControl name="Movement" phrase={TURN_PHRASES[query.turn]}>
      {(close) => (
        <ChoiceList
          legend="Turning movement"
          choices={(["any", ...TURNS] as const).map((value) => ({ value, label: TURN_PHRASES[value] }))}
          value={query.turn}
          onChoose={(turn) => onChange({ turn })}
          onSettle={close}
        />
      )}
    </SentenceControl>
  );
}

export function MinDelayControl({ query, onChange }: FilterControlProps) {
  return (
    <SliderControl
      name="Minimum delay"
      phrase={minDelayPhrase(query.minDelay)}
      label="Mean delay of at least"
      unit="s per vehicle"
      max={150}
      limit={600}
      value={query.minDelay}
      onChange={(minDelay) => onChange({ minDelay })}
    />
  );
}

export function MinSpillControl({ query, onChange }: FilterControlProps) {
  return (
    <SliderControl
      name="Spillback"
      phrase={minSpillPhrase(query.minSpill)}
      label="A leg spills back at least"
      unit="% of the time"
      max={50}
      limit={100}
      value={query.minSpill}
      onChange={(minSpill) => onChange({ minSpill })}
    />
  );
}

export function EvidenceControl({ query, onChange }: FilterControlProps) {
  return (
    <SentenceControl name="Evidence" phrase={EVIDENCE_PHRASES[query.evidence]}>
      {(close) => (
        <ChoiceList
          legend="How far the sample must support a figure"
          choices={EVIDENCE_FLOORS.map((value) => ({ value, label: EVIDENCE_PHRASES[value] }))}
          value={query.evidence}
          onChoose={(evidence) => onChange({ evidence })}
          onSettle={close}
        />
      )}
    </SentenceControl>
  );
}

const ANY_CORRIDOR = "any";

export function CorridorControl({ query, onChange }: FilterControlProps) {
  const { data: corridors = [] } = useQuery(corridorsQuery());
  if (corridors.length === 0 && query.corridor === undefined) return <span>in the whole city</span>;
  const chosen = corridors.find(({ id }) => id === query.corridor);
  const phrase = query.corridor === undefined ? "the whole city" : (chosen?.name ?? `corridor ${query.corridor}`);
  const choices = corridors.map(({ id, name }) => ({ value: String(id), label: name }));
  return (
    <>
      {query.corridor === undefined ? "in " : "along "}
      <SentenceControl name="Corridor" phrase={phrase}>
        {(close) => (
          <ChoiceList
            legend="Corridor"
            choices={[{ value: ANY_CORRIDOR, label: "the whole city" }, ...choices]}
            value={query.corridor === undefined ? ANY_CORRIDOR : String(query.corridor)}
            onChoose={(value) => onChange({ corridor: value === ANY_CORRIDOR ? undefined : Number(value) })}
            onSettle={close}
          />
        )}
      </SentenceControl>
    </>
  );
}

export function SortControl({ query, onChange }: FilterControlProps) {
  const words = SORT_WORDS[query.sort];
  const isUsual = (query.dir ?? defaultDirection(query.sort)) === defaultDirection(query.sort);
  return (
    <>
      {isUsual ? words.usual : words.reversed}{" "}
      <SentenceControl name="Order" phrase={words.phrase}>
        {(close) => (
          <ChoiceList
            legend="Order of the list"
            choices={SORT_KEYS.map((value) => ({ value, label: SORT_WORDS[value].phrase }))}
            value={query.sort}
            onChoose={(sort) => onChange({ sort, dir: undefined })}
            onSettle={close}
          >
            <button type="button" className="text-link mt-3 min-h-6 text-sm" onClick={() => onChange({ dir: oppositeOf(query) })}>
              Turn the order round
            </button>
          </ChoiceList>
        )}
      </SentenceControl>
    </>
  );
}

/** `undefined` is the usual direction: it is left out of the address. */
export function oppositeOf({ sort, dir }: Pick<ScreenQuery, "sort" | "dir">): ScreenQuery["dir"] {
  const usual = defaultDirection(sort);
  const other = usual === "asc" ? "desc" : "asc";
  return (dir ?? usual) === usual ? other : undefined;
}
