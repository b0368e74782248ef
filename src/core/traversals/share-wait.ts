import { KNOTS, type Course } from "@/core/traversals/course";
import { STOPPING } from "@/core/traversals/stops";

/** Settings of a wait that may have been at any of several stop lines. */
export const SHARING = Object.freeze({
  /** Further lines that take part. */
  mostLines: 2,
  /** A line this near before the next ping takes no part, m. */
  clearM: 15,
  /** Who stands this far past a line still waits for its signal, m. */
  pastLineM: 4,
});

/** Most points that a step between two pings comes to: its ping, four of its own wait, two for each further line. */
export const KNOTS_A_STEP = 5 + 2 * SHARING.mostLines;

/**
 * A long step may pass several stop lines, and its pings do not tell at which of them the time was lost. The wait of
 * step i, written as knots from `first` on, is shared equally with the other lines that the step passes, so that no
 * junction is given all of it and none of them nothing. Time lost at a further line counts as no stop: its knots have
 * no speed. `line` is the first of `lines` ahead of ping i. O(lines in the step).
 */
export function shareWait(from: Course, i: number, lines: ArrayLike<number>, line: number, first: number, to: Course): void {
  let stand = standIn(from, i, first, to);
  if (stand < 0) return;
  const place = to.distanceM[stand];
  const others = otherLines(lines, line, place, from.distanceM[i], from.distanceM[i + 1] - SHARING.clearM);
  if (others.length === 0) return;
  const end = stand + 1 < to.length ? to.tMs[stand + 1] : from.tMs[i + 1];
  const partMs = (end - to.tMs[stand]) / (1 + others.length);
  for (const at of others) {
    const isLater = at > place;
    let next = isLater ? stand + 1 : first;
    while (next < to.length && to.distanceM[next] < at) next += 1;
    const driveMs = timeBetween(from, i, next, at, to);
    if (isLater) for (let n = stand + 1; n < next; n++) to.tMs[n] -= partMs;
    else for (let n = next; n <= stand; n++) to.tMs[n] += partMs;
    insertPair(to, next, isLater ? driveMs - partMs : driveMs, partMs, at, from.freeMs[i]);
    if (!isLater) stand += 2;
  }
}

/** Index of the point after which the step's vehicle stands; -1 where it nowhere does. */
function standIn(from: Course, i: number, first: number, to: Course): number {
  for (let n = first - 1; n < to.length; n++) {
    const next = n + 1 < to.length ? to.distanceM[n + 1] : from.distanceM[i + 1];
    if (to.speedMs[n] < STOPPING.stopMs && next === to.distanceM[n]) return n;
  }
  return -1;
}

/** Lines that the step passes, without the one that its stand belongs to. */
function otherLines(lines: ArrayLike<number>, line: number, place: number, fromM: number, toM: number): number[] {
  const out: number[] = [];
  let isOwnFound = false;
  for (let l = line; l < lines.length && lines[l] < toM && out.length < SHARING.mostLines; l++) {
    const isOwn = !isOwnFound && lines[l] + SHARING.pastLineM >= place;
    if (isOwn) isOwnFound = true;
    else if (lines[l] > fromM) out.push(lines[l]);
  }
  return out;
}

/** When the vehicle drives over a place between point `next` and the one before it. */
function timeBetween(from: Course, i: number, next: number, at: number, to: Course): number {
  const t0 = to.tMs[next - 1];
  const d0 = to.distanceM[next - 1];
  const t1 = next < to.length ? to.tMs[next] : from.tMs[i + 1];
  const d1 = next < to.length ? to.distanceM[next] : from.distanceM[i + 1];
  return d1 > d0 ? t0 + ((at - d0) / (d1 - d0)) * (t1 - t0) : t0;
}

function insertPair(to: Course, n: number, tMs: number, waitMs: number, at: number, freeMs: number): void {
  for (const column of [to.tMs, to.distanceM, to.speedMs, to.freeMs, to.kind]) column.copyWithin(n + 2, n, to.length);
  for (let k = n; k < n + 2; k++) {
    to.tMs[k] = tMs + (k - n) * waitMs;
    to.distanceM[k] = at;
    to.speedMs[k] = NaN;
    to.freeMs[k] = freeMs;
    to.kind[k] = KNOTS.unplaced;
  }
  to.length += 2;
}
