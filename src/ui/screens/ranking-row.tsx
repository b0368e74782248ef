"use client";

import { FlexRender, type Row } from "@tanstack/react-table";
import { memo } from "react";
import type { RankedJunction } from "@/domain/screen";
import { classNames } from "@/ui/primitives/class-names";
import { screenLooks, WorstMovement, type SCREEN_FEATURES, type Width } from "./screen-columns";

export const SHOWN_FROM: Record<Width, string> = {
  always: "flex",
  middle: "hidden @xl:flex",
  wide: "hidden @[44rem]:flex",
};

/** Columns of the ruled list in three widths of its panel; the cells that `SHOWN_FROM` hides leave no gap. */
export const GRID =
  "grid grid-cols-[2.4rem_minmax(0,1fr)_3.3rem_2.9rem_3.3rem] @xl:grid-cols-[2.6rem_minmax(0,1.4fr)_minmax(0,1fr)_3rem_4.6rem_2.9rem_3.3rem_3.4rem] @[44rem]:grid-cols-[2.5rem_3.6rem_minmax(0,1.2fr)_minmax(0,1fr)_2.8rem_4.4rem_2.3rem_2.9rem_3.1rem_3.1rem_3.3rem_3.3rem]";

/** What two lines of the narrowest column of names hold in any case. */
const MOST_LETTERS = 26;

const LOOKS = screenLooks("metric", "rank");

export interface RankingRowProps {
  row: Row<typeof SCREEN_FEATURES, RankedJunction>;
  /** Made anew when units, scale or order change. */
  columns: unknown;
  index: number;
  isSelected: boolean;
  isTabStop: boolean;
  onSelect: (junctionId: number) => void;
  onHover: (junctionId: number | null) => void;
}

/** Drawn again only when its own figures, its place or its own selection change: the library makes all its rows anew for every list. */
export const RankingRow = memo(function RankingRow({ row, index, isSelected, isTabStop, onSelect, onHover }: RankingRowProps) {
  const { junctionId, name } = row.original;
  return (
    <div
      role="row"
      data-row={index}
      aria-rowindex={index + 2}
      onClick={() => onSelect(junctionId)}
      onPointerEnter={() => onHover(junctionId)}
      onPointerLeave={() => onHover(null)}
      className={classNames(
        GRID,
        "min-h-[4.75rem] cursor-pointer border-b border-l-4 border-b-rule pr-1 @xl:min-h-12",
        isSelected ? "border-l-pick bg-[#EDF3F0] py-1" : "h-[4.75rem] border-l-transparent hover:bg-paper @xl:h-12",
      )}
    >
      {row.getAllCells().map((cell) => {
        const look = LOOKS[cell.column.id];
        return (
          <div
            key={cell.id}
            role="cell"
            className={classNames(SHOWN_FROM[look.width], "min-w-0 items-center px-1.5 leading-tight", look.numeric && "justify-end tabular-nums")}
          >
            {cell.column.id === "name" ? (
              <span className="group relative min-w-0">
                <button
                  type="button"
                  data-index={index}
                  tabIndex={isTabStop ? 0 : -1}
                  aria-expanded={isSelected}
                  onClick={(event) => {
                    event.stopPropagation();
                    onSelect(junctionId);
                  }}
                  className={classNames("min-h-6 text-left text-[1.02rem] font-medium leading-[1.15]", !isSelected && "line-clamp-3 @xl:line-clamp-2")}
                >
                  {name}
                </button>
                {name.length > MOST_LETTERS && !isSelected ? <WholeName name={name} /> : null}
                <span className="line-clamp-1 text-sm @xl:hidden" aria-hidden="true">
                  <WorstMovement row={row.original} />
                </span>
              </span>
            ) : (
              <FlexRender cell={cell} />
            )}
          </div>
        );
      })}
    </div>
  );
}, isSameRow);

/** A name that the row may have cut, in full while the pointer or the focus is on it. */
function WholeName({ name }: { name: string }) {
  return (
    <span aria-hidden="true" className="pointer-events-none invisible absolute -left-2 -top-1.5 z-10 w-max max-w-72 border border-ink bg-sheet px-2 py-1 text-[1.02rem] font-medium group-focus-within:visible group-hover:visible">
      {name}
    </span>
  );
}

function isSameRow({ row, ...rest }: RankingRowProps, { row: nextRow, ...nextRest }: RankingRowProps): boolean {
  return row.original === nextRow.original && (Object.keys(rest) as (keyof typeof rest)[]).every((key) => rest[key] === nextRest[key]);
}
