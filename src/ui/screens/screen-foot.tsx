"use client";

import type { ScreenQuery, ScreenResult } from "@/domain/screen";
import { counted, formatNumber } from "@/ui/format";
import { Caution } from "@/ui/primitives/caution";
import { useCity } from "@/ui/shell/city";

/** Under the list: junctions that have no figure, what the figures rest on, and what they are not. */
export function ScreenFoot({ result, query, onChange }: { result: ScreenResult; query: ScreenQuery; onChange: (part: Partial<ScreenQuery>) => void }) {
  const { locale } = useCity();
  const { basis, rows } = result;
  const unranked = rows.filter((row) => row.rank === null).length;
  return (
    <div className="border-t border-ink bg-paper px-4 py-2.5 font-table text-sm text-ink-soft">
      {unranked > 0 ? (
        <p className="mb-1 text-ink">
          {counted(unranked, "junction has", "junctions have", locale)} no figure for these hours: too few vehicles were seen.{" "}
          <button type="button" className="text-link min-h-6" onClick={() => onChange({ evidence: query.evidence === "none" ? "thin" : "none" })}>
            {query.evidence === "none" ? "Leave them out" : "List them at the end"}
          </button>
        </p>
      ) : null}
      <p>
        Rests on {counted(basis.traversals, "traversal", "traversals", locale)} on {counted(basis.days, "day", "days", locale)}
        {basis.medianIntervalS === null ? "" : `, a ping every ${formatNumber(basis.medianIntervalS, locale)} s`}; method version {basis.methodVersion}.
        {basis.waitingFiles ? ` ${counted(basis.waitingFiles, "file waits for being read in again by the present method, and counts", "files wait for being read in again by the present method, and count", locale)} nowhere until then.` : ""}
        {basis.daysLeftOut ? ` ${counted(basis.daysLeftOut, "earlier day is", "earlier days are", locale)} left out: choose dates to see them.` : ""}
      </p>
      <Caution />
    </div>
  );
}
