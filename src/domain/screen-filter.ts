import type { RankedJunction, ScreenQuery } from "./screen";
import { EVIDENCE_FLOORS, type SortKey } from "./screen-choices";

/** The part of a query that chooses and orders rows; the rest (when, which turn) decides the figures in them. */
export type RowFilter = Pick<ScreenQuery, "minDelay" | "minSpill" | "evidence" | "corridor" | "q" | "sort" | "dir">;

/**
 * Rows that pass the filters, in the order asked for. Ranks stay those of the whole city. A row without the figure
 * that a filter or the order asks about does not pass the filter, and comes last in either direction.
 */
export function applyScreenFilter(rows: readonly RankedJunction[], filter: RowFilter): RankedJunction[] {
  const wanted = plain(filter.q);
  const floor = EVIDENCE_FLOORS.indexOf(filter.evidence);
  const passing = rows.filter(
    (row) =>
      (filter.minDelay === 0 || (row.delay !== null && row.delay.value >= filter.minDelay)) &&
      (filter.minSpill === 0 || (row.spill !== null && row.spill.value * 100 >= filter.minSpill)) &&
      EVIDENCE_FLOORS.indexOf(row.evidence) >= floor &&
      (filter.corridor === undefined || row.corridorId === filter.corridor) &&
      (wanted === "" || plain(`${row.name} ${row.code}`).includes(wanted)),
  );
  return sortRows(passing, filter.sort, filter.dir ?? defaultDirection(filter.sort));
}

/** Ranks and names read from the top; of everything else the worst, longest or most comes first. */
export function defaultDirection(sort: SortKey): "asc" | "desc" {
  return sort === "rank" || sort === "name" ? "asc" : "desc";
}

function sortRows(rows: RankedJunction[], sort: SortKey, dir: "asc" | "desc"): RankedJunction[] {
  const sign = dir === "asc" ? 1 : -1;
  return rows.sort((a, b) => {
    if (sort === "name") return sign * byName(a, b) || byRank(a, b);
    const [left, right] = [figureOf(a, sort), figureOf(b, sort)];
    if (left === null || right === null) return Number(left === null) - Number(right === null) || byRank(a, b);
    return sign * (left - right) || byRank(a, b);
  });
}

function figureOf(row: RankedJunction, sort: Exclude<SortKey, "name">): number | null {
  switch (sort) {
    case "rank":
      return row.rank;
    case "delay":
      return row.delay && row.delay.value;
    case "p95":
      return row.p95S;
    case "hours":
      return row.hoursSeen;
    case "stops":
      return row.stopsPerVehicle;
    case "reach":
      return row.reachM;
    case "storage":
      return row.reachM !== null && row.storageM ? row.reachM / row.storageM : null;
    case "spill":
      return row.spill && row.spill.value;
    case "vehicles":
      return row.vehicles;
    case "evidence":
      return EVIDENCE_FLOORS.indexOf(row.evidence);
  }
}

const collator = new Intl.Collator("en", { numeric: true, sensitivity: "base" });

function byName(a: RankedJunction, b: RankedJunction): number {
  return collator.compare(a.name, b.name);
}

/** Total order, so that the list never shuffles between two equal rows. */
function byRank(a: RankedJunction, b: RankedJunction): number {
  const [left, right] = [a.rank ?? Infinity, b.rank ?? Infinity];
  return (left === right ? 0 : left - right) || byName(a, b) || a.junctionId - b.junctionId;
}

/** Without case and accents: who types "sao" finds "São". */
function plain(text: string): string {
  return text.normalize("NFD").replace(/\p{Mn}/gu, "").toLowerCase().trim();
}
