"use client";

import { createColumnHelper, rowSortingFeature, tableFeatures } from "@tanstack/react-table";
import type { RankedJunction } from "@/domain/screen";
import type { SortKey } from "@/domain/screen-choices";
import { formatNumber, formatSeconds, formatShare, lengthNumber, lengthUnit, NO_FIGURE, shareNumber, type Units } from "@/ui/format";
import { classNames } from "@/ui/primitives/class-names";
import { EvidenceBar } from "@/ui/primitives/evidence-bar";
import { IntervalMark } from "@/ui/primitives/interval-mark";
import { LosSquare } from "@/ui/primitives/los-square";
import { RankSpan } from "@/ui/primitives/rank-span";
import { StorageBar } from "@/ui/primitives/storage-bar";
import { movementName } from "./explain";
import { TurnArrow } from "./turn-arrow";

/** Sorting itself is done by `applyScreenFilter`, the same on server and browser. */
export const SCREEN_FEATURES = tableFeatures({ rowSortingFeature });

/** Where a column shows: always, from a middling panel on, or in a wide one. The grid in `screen-grid.css` goes with it. */
export type Width = "always" | "middle" | "wide";

export interface ColumnLook {
  head: string;
  /** Read out and shown on pointing, where the head alone is short. */
  says?: string;
  sort: SortKey | null;
  width: Width;
  numeric?: boolean;
}

/** What the drawings of all rows share. */
export interface ColumnScale {
  units: Units;
  locale: string;
  maxDelayS: number;
  lastRank: number;
  sort: SortKey;
}

/** Share of time from which a leg's spillback is marked. */
const MUCH_SPILL = 0.1;

const helper = createColumnHelper<typeof SCREEN_FEATURES, RankedJunction>();

/** Measures without a column of their own take the last one while the list is ordered by them. */
const GUESTS: Partial<Record<SortKey, ColumnLook>> = {
  p95: { head: "95th pct. s/veh", says: "95th percentile of delay, seconds per vehicle", sort: "p95", width: "wide", numeric: true },
  hours: { head: "delay seen h", says: "hours of delay of the vehicles seen", sort: "hours", width: "wide", numeric: true },
  stops: { head: "stops /veh", says: "stops per vehicle", sort: "stops", width: "wide", numeric: true },
};

const VEHICLES: ColumnLook = { head: "vehicles seen", sort: "vehicles", width: "wide", numeric: true };

export function screenLooks(units: Units, sort: SortKey): Record<string, ColumnLook> {
  return {
    rank: { head: "rank", sort: "rank", width: "always", numeric: true },
    span: { head: "could be", says: "span of ranks that the sample allows", sort: null, width: "wide" },
    name: { head: "junction", sort: "name", width: "always" },
    worst: { head: "worst movement", sort: null, width: "middle" },
    delay: { head: "delay s/veh", says: "mean control delay, seconds per vehicle", sort: "delay", width: "always", numeric: true },
    interval: { head: "95 %", says: "95 % interval of mean delay", sort: null, width: "middle" },
    los: { head: "LOS", says: "level of service", sort: null, width: "always" },
    reach: { head: `reach ${lengthUnit(units)}`, says: "95th percentile of observed reach on the fullest leg", sort: "reach", width: "middle", numeric: true },
    storage: { head: "storage", says: "share of the storage that the reach takes", sort: "storage", width: "wide" },
    spill: { head: "spills % of time", says: "share of time in which a leg spills back", sort: "spill", width: "always", numeric: true },
    evidence: { head: "evidence", sort: "evidence", width: "wide" },
    last: GUESTS[sort] ?? VEHICLES,
  };
}

export function screenColumns({ units, locale, maxDelayS, lastRank, sort }: ColumnScale) {
  return helper.columns([
    helper.display({ id: "rank", cell: ({ row: { original: row } }) => <span className="text-[1.05rem]">{row.rank ?? <NoRank />}</span> }),
    helper.display({ id: "span", cell: ({ row: { original: row } }) => <RankSpan rank={row.rank} low={row.rankLow} high={row.rankHigh} last={lastRank} /> }),
    helper.display({ id: "name", cell: ({ row: { original: row } }) => row.name }),
    helper.display({ id: "worst", cell: ({ row: { original: row } }) => <WorstMovement row={row} /> }),
    helper.display({ id: "delay", cell: ({ row: { original: row } }) => <Delay row={row} locale={locale} /> }),
    helper.display({
      id: "interval",
      cell: ({ row: { original: row } }) => (
        <IntervalMark
          estimate={row.delay}
          max={maxDelayS}
          describe={(e) => `95 % interval ${formatSeconds(e.low, locale)} to ${formatSeconds(e.high, locale)}`}
        />
      ),
    }),
    helper.display({ id: "los", cell: ({ row: { original: row } }) => <LosSquare los={row.los} /> }),
    helper.display({ id: "reach", cell: ({ row: { original: row } }) => lengthNumber(row.reachM, units, locale) }),
    helper.display({ id: "storage", cell: ({ row: { original: row } }) => <StorageBar reachM={row.reachM} storageM={row.storageM} /> }),
    helper.display({
      id: "spill",
      cell: ({ row: { original: row } }) => <Spill row={row} locale={locale} />,
    }),
    helper.display({ id: "evidence", cell: ({ row: { original: row } }) => <EvidenceBar evidence={row.evidence} /> }),
    helper.display({ id: "last", cell: ({ row: { original: row } }) => <span className="text-ink-soft">{lastFigure(row, sort, locale)}</span> }),
  ]);
}

function lastFigure(row: RankedJunction, sort: SortKey, locale: string): string {
  if (sort === "p95") return formatNumber(row.p95S, locale);
  if (sort === "hours") return formatNumber(row.hoursSeen, locale, 1);
  if (sort === "stops") return formatNumber(row.stopsPerVehicle, locale, 2);
  return formatNumber(row.vehicles, locale);
}

function NoRank() {
  return (
    <span className="text-ink-soft" title="Not ranked: no evidence">
      <span aria-hidden="true">·</span>
      <span className="sr-only">not ranked</span>
    </span>
  );
}

function Spill({ row: { spill }, locale }: { row: RankedJunction; locale: string }) {
  const isMuch = spill !== null && spill.value >= MUCH_SPILL;
  const interval = spill ? `95 % interval ${formatShare(spill.low, locale)} to ${formatShare(spill.high, locale)}` : undefined;
  return (
    <span className={classNames(isMuch && "font-semibold text-tail")} title={interval}>
      {shareNumber(spill?.value, locale)}
    </span>
  );
}

function Delay({ row, locale }: { row: RankedJunction; locale: string }) {
  if (row.rank === null) return <span className="text-sm text-ink-soft">no data</span>;
  return <span className="text-[1.05rem] font-semibold">{formatNumber(row.delay?.value, locale)}</span>;
}

export function WorstMovement({ row }: { row: RankedJunction }) {
  if (!row.worst) return <span className="text-ink-soft">{NO_FIGURE}</span>;
  return (
    <span className="line-clamp-2 text-ink-soft">
      <TurnArrow turn={row.worst.turn} /> {movementName(row.worst)}
    </span>
  );
}
