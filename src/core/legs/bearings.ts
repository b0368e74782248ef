import { normaliseDeg, signedTurnDeg } from "@/core/geometry/angles";
import type { Kept } from "@/core/legs/prune";
import { FACING, type Headings, type Usage } from "@/core/legs/usage";
import type { Network } from "@/core/types";

/** Weight of the drawn line's own bearing, in headings. */
const LINE_N = 3;
/** Stretch of a street, from the junction's box on, that tells its bearing there, in bins of headings: 40 m. */
const WINDOW_BINS = 10;

/**
 * Turns the bearing of each derived leg and exit to the mean heading of the vehicles there: with few pings their
 * positions tell a direction over thirty metres worse than their headings do. Where streets meet at a sharp angle the
 * box is wide, and vehicles turn inside it: only headings beyond the settled stop line count, though `draft`, on which
 * they were gathered, began nearer to the junction. O(legs and exits).
 */
export function faceTraffic(kept: Kept, draft: Pick<Network, "legs" | "exits">, usage: Usage, carried: Set<string>): Kept {
  const legs = kept.legs.map((leg, n) => {
    const isFixed = leg.origin !== "derived" || leg.locked || carried.has(leg.id);
    return isFixed ? leg : { ...leg, bearingDeg: facing(usage.legHeadings, kept.legFrom[n], movedOutM(leg, draft.legs[kept.legFrom[n]]), leg.bearingDeg) };
  });
  const exits = kept.exits.map((exit, n) => {
    if (carried.has(exit.id)) return exit;
    const from = kept.exitFrom[n];
    return { ...exit, bearingDeg: facing(usage.exitHeadings, from, movedOutM(exit, draft.exits[from]), exit.bearingDeg) };
  });
  return { ...kept, legs, exits };
}

/** How much farther from the junction's point a line begins than it did. */
function movedOutM(now: { line: Float64Array }, before: { line: Float64Array }): number {
  return Math.max(0, Math.hypot(now.line[0], now.line[1]) - Math.hypot(before.line[0], before.line[1]));
}

function facing({ count, east, north }: Headings, item: number, outM: number, lineDeg: number): number {
  const first = item * FACING.bins + Math.min(FACING.bins - 1, Math.round(outM / FACING.binM));
  const end = Math.min(first + WINDOW_BINS, (item + 1) * FACING.bins);
  const sum = { n: 0, east: 0, north: 0 };
  for (let i = first; i < end; i++) {
    sum.n += count[i];
    sum.east += east[i];
    sum.north += north[i];
  }
  if (sum.n === 0) return lineDeg;
  const meanDeg = (Math.atan2(sum.east, sum.north) * 180) / Math.PI;
  return normaliseDeg(lineDeg + (signedTurnDeg(lineDeg, meanDeg) * sum.n) / (sum.n + LINE_N));
}
