"use client";

import { useTable } from "@tanstack/react-table";
import { memo, useCallback, useEffect, useLayoutEffect, useMemo, useRef, useState, type KeyboardEvent } from "react";
import type { RankedJunction, ScreenQuery } from "@/domain/screen";
import type { SortKey } from "@/domain/screen-choices";
import { useCity } from "@/ui/shell/city";
import { oppositeOf } from "./filter-controls";
import { RankingDetail } from "./ranking-detail";
import { RankingHead } from "./ranking-head";
import { RankingRow } from "./ranking-row";
import { SCREEN_FEATURES, screenColumns } from "./screen-columns";
import { useRowWindow } from "./use-row-window";

export interface RankingTableProps {
  rows: RankedJunction[];
  query: ScreenQuery;
  /** Over all rows of the city, so that the drawings keep their scale while filters move. */
  maxDelayS: number;
  lastRank: number;
  selected: number | null;
  onSelect: (junctionId: number | null) => void;
  onHover: (junctionId: number | null) => void;
  onSort: (part: Pick<ScreenQuery, "sort" | "dir">) => void;
}

const KEY_STEPS: Record<string, number> = { ArrowDown: 1, ArrowUp: -1, PageDown: 10, PageUp: -10, Home: -Infinity, End: Infinity };

/** Drawn again only when what it lists changes: not while the next rows are still being chosen. */
export const RankingTable = memo(function RankingTable({ rows: data, query, maxDelayS, lastRank, selected, onSelect, onHover, onSort }: RankingTableProps) {
  const { settings, locale } = useCity();
  const list = useRef<HTMLDivElement>(null);
  const { units } = settings;
  const columns = useMemo(() => screenColumns({ units, locale, maxDelayS, lastRank, sort: query.sort }), [units, locale, maxDelayS, lastRank, query.sort]);
  const table = useTable({ features: SCREEN_FEATURES, columns, data, manualSorting: true, getRowId: (row) => String(row.junctionId) });
  const rows = table.getRowModel().rows;
  const view = useRowWindow(list, rows.length);
  const selectedIndex = useMemo(() => data.findIndex((row) => row.junctionId === selected), [data, selected]);

  const latest = useRef({ selected, onSelect });
  useEffect(() => {
    latest.current = { selected, onSelect };
  });
  const toggle = useCallback((id: number) => latest.current.onSelect(latest.current.selected === id ? null : id), []);

  useScrollToSelected(list, selected, selectedIndex, view.rowPx);
  const { focusIndex, onKeyDown } = useRowKeys(list, rows.length, view.rowPx);
  const tabStop = Math.min(focusIndex ?? Math.max(0, selectedIndex), Math.max(0, rows.length - 1));
  const drawn = rows.slice(view.start, view.end);

  return (
    <div role="table" aria-label="Junctions, ranked" aria-rowcount={rows.length + 1} className="@container font-table text-[0.97rem]">
      <RankingHead units={units} query={query} onSort={(sort) => onSort(sortAfter(query, sort))} />
      <div ref={list} role="rowgroup" onKeyDown={onKeyDown} style={{ paddingTop: view.start * view.rowPx, paddingBottom: (rows.length - view.end) * view.rowPx }}>
        {drawn.map((row, at) => {
          const index = view.start + at;
          const isSelected = index === selectedIndex;
          return (
            <div key={row.id} role="presentation">
              <RankingRow row={row} columns={columns} index={index} isSelected={isSelected} isTabStop={index === tabStop} onSelect={toggle} onHover={onHover} />
              {isSelected ? <RankingDetail row={row.original} query={query} /> : null}
            </div>
          );
        })}
      </div>
    </div>
  );
});

/** A second press on the same head turns the order round. */
function sortAfter(query: Pick<ScreenQuery, "sort" | "dir">, sort: SortKey): Pick<ScreenQuery, "sort" | "dir"> {
  if (query.sort !== sort) return { sort, dir: undefined };
  return { sort, dir: oppositeOf(query) };
}

type ListRef = React.RefObject<HTMLDivElement | null>;

/** A junction picked on the map comes into view in the list; one picked in the list is in view already. */
function useScrollToSelected(list: ListRef, selected: number | null, index: number, rowPx: number): void {
  const place = useRef({ index, rowPx });
  useEffect(() => {
    place.current = { index, rowPx };
  });
  useEffect(() => {
    if (selected !== null && place.current.index >= 0) bringIntoView(list.current, place.current.index, place.current.rowPx);
    // Once more when the rows have been measured.
  }, [list, selected, rowPx]);
}

/** One tab stop for the list; arrow keys go from row to row, also to rows that are not drawn yet. */
function useRowKeys(list: ListRef, count: number, rowPx: number) {
  const [focusIndex, setFocusIndex] = useState<number | null>(null);
  const wantsFocus = useRef(false);

  useLayoutEffect(() => {
    if (!wantsFocus.current || focusIndex === null) return;
    const button = list.current?.querySelector<HTMLElement>(`[data-index="${focusIndex}"]`);
    if (!button) return;
    wantsFocus.current = false;
    button.focus({ preventScroll: true });
  });

  const onKeyDown = (event: KeyboardEvent<HTMLElement>) => {
    const step = KEY_STEPS[event.key];
    const from = (event.target as HTMLElement).dataset.index;
    if (step === undefined || from === undefined) return;
    event.preventDefault();
    const next = Math.max(0, Math.min(count - 1, Number(from) + step));
    bringIntoView(list.current, next, rowPx);
    wantsFocus.current = true;
    setFocusIndex(next);
  };
  return { focusIndex, onKeyDown };
}

/** Scrolls whatever scrolls the list, so that row `index` stands clear of the head and the lower edge. */
function bringIntoView(list: HTMLElement | null, index: number, rowPx: number): void {
  if (!list) return;
  const scroller = list.closest<HTMLElement>("[data-scrolls]");
  const own = scroller !== null && scroller.scrollHeight > scroller.clientHeight + 1 && getComputedStyle(scroller).overflowY !== "visible";
  const view = own ? scroller.getBoundingClientRect() : { top: 0, bottom: window.innerHeight };
  const top = list.getBoundingClientRect().top + index * rowPx;
  const above = view.top + rowPx * 1.5 - top;
  const below = top + rowPx * 4.5 - view.bottom;
  const by = above > 0 ? -above : below > 0 ? below : 0;
  if (by !== 0) (own ? scroller : window).scrollBy({ top: by });
}
