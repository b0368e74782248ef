"use client";

import Link from "next/link";
import { memo, useRef } from "react";
import type { LegToCheck } from "@/domain/leg-check";
import { counted } from "@/ui/format";
import { classNames } from "@/ui/primitives/class-names";
import { useRowWindow } from "@/ui/screens/use-row-window";
import { useCity } from "@/ui/shell/city";
import { originWords } from "./leg-words";

/** Only the rows in view are drawn; all are equally high, so that thousands scroll smoothly. */
export function LegList({ legs }: { legs: LegToCheck[] }) {
  const list = useRef<HTMLUListElement>(null);
  const view = useRowWindow(list, legs.length);
  return (
    <ul ref={list} aria-label="Legs, most doubtful first" style={{ paddingTop: view.start * view.rowPx, paddingBottom: (legs.length - view.end) * view.rowPx }}>
      {legs.slice(view.start, view.end).map((leg, at) => (
        <LegRow key={leg.id} leg={leg} place={view.start + at + 1} of={legs.length} />
      ))}
    </ul>
  );
}

const LegRow = memo(function LegRow({ leg, place, of }: { leg: LegToCheck; place: number; of: number }) {
  const { locale } = useCity();
  const isDoubtful = leg.doubts.length > 0;
  const words = isDoubtful ? leg.doubts.join(" ") : leg.locked ? "Looked at and locked by an engineer." : "Nothing speaks against it.";
  return (
    <li data-row aria-posinset={place} aria-setsize={of} className="h-[9.25rem] border-b border-rule sm:h-[4.25rem]">
      <Link
        href={`/data/legs/${leg.junction.id}?leg=${leg.id}`}
        prefetch={false}
        className="grid h-full content-center gap-x-6 gap-y-0.5 overflow-hidden px-4 py-2 outline-offset-[-3px] hover:bg-paper sm:grid-cols-[minmax(11rem,3fr)_minmax(0,6fr)_minmax(7.5rem,1.3fr)] sm:items-center sm:px-6"
      >
        <span className="min-w-0 font-table leading-tight">
          <span className="block truncate font-medium">{leg.name}</span>
          <span className="block truncate text-sm text-ink-soft">
            {leg.junction.code} {leg.junction.name}
          </span>
        </span>
        <span title={words} className={classNames("line-clamp-3 min-w-0 text-[0.95rem] leading-snug sm:line-clamp-2", !isDoubtful && "text-ink-soft")}>
          {words}
        </span>
        <span className="font-table text-sm leading-tight text-ink-soft">
          <span className="mr-3 sm:mr-0 sm:block">{counted(leg.support, "vehicle", "vehicles", locale)}</span>
          <span className={leg.locked ? "font-medium text-ink" : undefined}>{leg.locked ? "locked" : originWords(leg.origin)}</span>
        </span>
      </Link>
    </li>
  );
});
