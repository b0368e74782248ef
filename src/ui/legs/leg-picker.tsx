"use client";

import type { LegOfCheck } from "@/domain/leg-check";
import { classNames } from "@/ui/primitives/class-names";
import { standingWords } from "./leg-words";

/** The junction's legs to choose from, clockwise from north; the same choice as a click on the plan. */
export function LegPicker({ legs, selected, onSelect }: { legs: LegOfCheck[]; selected: number | null; onSelect: (legId: number) => void }) {
  return (
    <fieldset>
      <legend className="mb-1 text-lg font-medium">Legs</legend>
      {legs.map((leg) => (
        <label key={leg.id} className={classNames("flex min-h-9 cursor-pointer items-baseline gap-2.5 border-t border-rule px-2 py-1.5 leading-tight hover:bg-paper", leg.id === selected && "bg-[#E7EFEB]")}>
          <input type="radio" name="leg" value={leg.id} checked={leg.id === selected} onChange={() => onSelect(leg.id)} className="relative top-0.5 size-4 shrink-0 accent-pick" />
          <span className="flex-1 font-table font-medium">{leg.name}</span>
          <span className="font-table text-sm text-ink-soft">{standingWords(leg)}</span>
        </label>
      ))}
    </fieldset>
  );
}
