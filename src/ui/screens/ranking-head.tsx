"use client";

import type { ScreenQuery } from "@/domain/screen";
import type { SortKey } from "@/domain/screen-choices";
import { defaultDirection } from "@/domain/screen-filter";
import type { Units } from "@/ui/format";
import { classNames } from "@/ui/primitives/class-names";
import { SortButton } from "@/ui/primitives/table";
import { GRID, SHOWN_FROM } from "./ranking-row";
import { screenLooks } from "./screen-columns";

export function RankingHead({ units, query, onSort }: { units: Units; query: ScreenQuery; onSort: (sort: SortKey) => void }) {
  return (
    <div role="rowgroup" className="sticky top-0 z-10 border-b border-ink bg-sheet">
      <div role="row" aria-rowindex={1} className={classNames(GRID, "border-l-4 border-l-transparent pb-1 pr-1 pt-2 text-sm leading-tight text-ink-soft")}>
        {Object.entries(screenLooks(units, query.sort)).map(([id, look]) => {
          const { sort } = look;
          const dir = sort !== null && query.sort === sort ? (query.dir ?? defaultDirection(sort)) : null;
          return (
            <div
              key={id}
              role="columnheader"
              title={look.says}
              aria-sort={sort === null ? undefined : dir === null ? "none" : dir === "asc" ? "ascending" : "descending"}
              className={classNames(SHOWN_FROM[look.width], "min-w-0 items-end px-1.5", look.numeric && "justify-end text-right")}
            >
              {sort === null ? look.head : <SortButton label={look.head} dir={dir} numeric={look.numeric} onSort={() => onSort(sort)} />}
            </div>
          );
        })}
      </div>
    </div>
  );
}
