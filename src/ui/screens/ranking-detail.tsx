"use client";

import Link from "next/link";
import type { RankedJunction, ScreenQuery } from "@/domain/screen";
import { useCity } from "@/ui/shell/city";
import { explainJunction, movementName } from "./explain";
import { whenSuffix } from "./screen-address";

/** Opens under the selected row: why it stands where it stands, and the ways on. */
export function RankingDetail({ row, query }: { row: RankedJunction; query: ScreenQuery }) {
  const { settings, locale } = useCity();
  const when = whenSuffix(query);
  return (
    <div role="row" className="border-b border-l-4 border-b-rule border-l-pick bg-[#EDF3F0]" data-testid="explanation">
      <div role="cell" className="px-4 pb-3 pt-1 font-text text-[0.95rem] leading-normal @xl:pl-12">
        <p className="max-w-[44rem]">{explainJunction(row, { units: settings.units, locale })}</p>
        <p className="mt-1.5 flex flex-wrap gap-x-5 gap-y-1 font-medium">
          <Link href={`/junctions/${row.junctionId}${when}`} className="text-link min-h-6">
            Open {row.name}
          </Link>
          {row.worst ? (
            <Link href={`/legs/${row.worst.legId}${when}`} className="text-link min-h-6">
              Strip of the leg with its worst movement, {movementName(row.worst)}
            </Link>
          ) : null}
        </p>
      </div>
    </div>
  );
}
