import { emptyScreenDay, QUEUE_TABLE, sizeOf, TRAVERSAL_TABLE, type SliceTable } from "./screen-day-columns";
import type { ScreenDay } from "./types";

/**
 * One slice from several of the same local day and method, as from different files. A traversal that is in more than
 * one of them (same movement, quarter, vehicle and delay) counts as often as in the one that has it most often; of a
 * leg's quarter the farthest reach and the longest observation are kept. Hence the order of the slices does not
 * matter, nor how they are grouped, and merging the same twice changes nothing. O(n log slices).
 */
export function mergeScreenDays(slices: readonly ScreenDay[]): ScreenDay {
  if (slices.length === 0) throw new RangeError("Nothing to merge.");
  const [{ day, methodVersion }] = slices;
  for (const slice of slices) {
    if (slice.day !== day) throw new RangeError(`Slices of different days, ${day} and ${slice.day}, cannot be merged.`);
    if (slice.methodVersion !== methodVersion) {
      throw new RangeError(`Slices of method versions ${methodVersion} and ${slice.methodVersion} cannot be merged.`);
    }
  }
  // Neighbours first: each entry is copied as often as the tree is deep.
  let level = slices;
  while (level.length > 1) {
    const pairs = level;
    level = Array.from({ length: Math.ceil(pairs.length / 2) }, (_, k) => (2 * k + 1 < pairs.length ? mergeTwo(pairs[2 * k], pairs[2 * k + 1]) : pairs[2 * k]));
  }
  return level[0];
}

/** How entries of one table meet: which of two comes first (0: they are the same one), and what both together are. */
interface Meeting {
  table: SliceTable;
  compare(a: ScreenDay, i: number, b: ScreenDay, k: number): number;
  join(to: ScreenDay, at: number, other: ScreenDay, k: number): void;
}

const TRAVERSALS: Meeting = {
  table: TRAVERSAL_TABLE,
  compare: (a, i, b, k) => a.quarter[i] - b.quarter[k] || a.vehicle[i] - b.vehicle[k] || a.delay[i] - b.delay[k],
  join: (to, at, other, k) => {
    to.stops[at] = Math.max(to.stops[at], other.stops[k]);
  },
};

const FIGURES = ["reach", "reachEstimate", "spilled", "observed"] as const;

const QUEUES: Meeting = {
  table: QUEUE_TABLE,
  compare: (a, i, b, k) => a.legQuarter[i] - b.legQuarter[k],
  join: (to, at, other, k) => {
    for (const name of FIGURES) to[name][at] = Math.max(to[name][at], other[name][k]);
  },
};

function mergeTwo(a: ScreenDay, b: ScreenDay): ScreenDay {
  const [left, right] = [sizeOf(a), sizeOf(b)];
  const roomy = emptyScreenDay(a.day, a.methodVersion, {
    movements: left.movements + right.movements,
    traversals: left.traversals + right.traversals,
    legs: left.legs + right.legs,
    legQuarters: left.legQuarters + right.legQuarters,
  });
  const passed = mergeTable(a, b, roomy, TRAVERSALS);
  const queued = mergeTable(a, b, roomy, QUEUES);
  const out = emptyScreenDay(a.day, a.methodVersion, { movements: passed.rows, traversals: passed.entries, legs: queued.rows, legQuarters: queued.entries });
  trimTable(roomy, out, TRAVERSAL_TABLE, passed);
  trimTable(roomy, out, QUEUE_TABLE, queued);
  return out;
}

interface Filled {
  rows: number;
  entries: number;
}

function mergeTable(a: ScreenDay, b: ScreenDay, to: ScreenDay, meeting: Meeting): Filled {
  const { key, start } = meeting.table;
  const [rowsOfA, rowsOfB] = [a[key].length, b[key].length];
  let [i, k, rows, entries] = [0, 0, 0, 0];
  while (i < rowsOfA || k < rowsOfB) {
    const keyOfA = i < rowsOfA ? a[key][i] : Infinity;
    const keyOfB = k < rowsOfB ? b[key][k] : Infinity;
    to[key][rows] = Math.min(keyOfA, keyOfB);
    const ofA = keyOfA <= keyOfB ? { from: a[start][i], end: a[start][++i] } : NONE;
    const ofB = keyOfB <= keyOfA ? { from: b[start][k], end: b[start][++k] } : NONE;
    entries = mergeRow(a, ofA, b, ofB, to, entries, meeting);
    to[start][++rows] = entries;
  }
  return { rows, entries };
}

interface Stretch {
  from: number;
  end: number;
}

const NONE: Stretch = { from: 0, end: 0 };

/** Returns where the next row begins. */
function mergeRow(a: ScreenDay, ofA: Stretch, b: ScreenDay, ofB: Stretch, to: ScreenDay, from: number, { table, compare, join }: Meeting): number {
  let at = from;
  let [i, k] = [ofA.from, ofB.from];
  while (i < ofA.end && k < ofB.end) {
    const order = compare(a, i, b, k);
    if (order <= 0) copyEntries(a, i, i + 1, to, at, table);
    else copyEntries(b, k, k + 1, to, at, table);
    if (order === 0) join(to, at, b, k);
    if (order <= 0) i += 1;
    if (order >= 0) k += 1;
    at += 1;
  }
  copyEntries(a, i, ofA.end, to, at, table);
  at += ofA.end - i;
  copyEntries(b, k, ofB.end, to, at, table);
  return at + ofB.end - k;
}

/** Below this many entries a loop is faster than a copy of the stretch. */
const FEW = 32;

function copyEntries(from: ScreenDay, first: number, end: number, to: ScreenDay, at: number, { columns }: SliceTable): void {
  for (const name of columns) {
    const [source, target] = [from[name], to[name]];
    if (end - first > FEW) target.set(source.subarray(first, end), at);
    else for (let i = first; i < end; i++) target[at + i - first] = source[i];
  }
}

function trimTable(from: ScreenDay, to: ScreenDay, { key, start, columns }: SliceTable, { rows, entries }: Filled): void {
  to[key].set(from[key].subarray(0, rows));
  to[start].set(from[start].subarray(0, rows + 1));
  for (const name of columns) to[name].set(from[name].subarray(0, entries));
}
