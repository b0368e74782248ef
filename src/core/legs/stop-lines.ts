import { legBearingDeg } from "@/core/legs/draft";
import type { Usage } from "@/core/legs/usage";
import { lengthOf, slice } from "@/core/geometry/polyline";
import type { Leg } from "@/core/types";

const BINS_FROM_M = -20;
const BINS_TO_M = 60;
const KERNEL_M = 3.5;
/** Passages with a stand that a leg needs for a stop line of its own. */
const LEAST_HEADS = 8;
/** A peak counts as the first vehicle's place from this share of the highest on. */
const PEAK_SHARE = 0.45;
/** Half a car and the gap that drivers leave to the line, m. */
const STANDS_BEFORE_M = 3.2;
const MOST_SHIFT_M = 18;

/**
 * Where the stop line lies on a leg's present line, metres upstream of its start: the first peak of the places where
 * the heads of queues stand. NaN where too few stood.
 */
export function findStopLine(heads: number[]): number {
  if (heads.length < LEAST_HEADS) return NaN;
  const size = BINS_TO_M - BINS_FROM_M + 1;
  const density = new Float64Array(size);
  for (const head of heads) {
    for (let b = 0; b < size; b++) density[b] += Math.exp(-0.5 * ((b + BINS_FROM_M - head) / KERNEL_M) ** 2);
  }
  const highest = density.reduce((most, value) => Math.max(most, value), 0);
  for (let b = 1; b + 1 < size; b++) {
    const isPeak = density[b] >= density[b - 1] && density[b] > density[b + 1];
    if (isPeak && density[b] >= PEAK_SHARE * highest) return clampShift(b + BINS_FROM_M - STANDS_BEFORE_M);
  }
  return NaN;
}

const clampShift = (shift: number): number => Math.min(MOST_SHIFT_M, Math.max(-MOST_SHIFT_M, shift));

/** Moves the stop lines of derived legs to where queues begin. */
export function placeStopLines(legs: Leg[], usage: Usage, carried: Set<string>): Leg[] {
  const isFree = (leg: Leg): boolean =>
    leg.origin === "derived" && !leg.locked && (!carried.has(leg.id) || leg.stopLineOrigin === "default");
  const shifts = legs.map((leg, i) => (isFree(leg) ? findStopLine(usage.heads[i]) : 0));
  return legs.map((leg, i) => {
    if (!(Math.abs(shifts[i]) > 0) || leg.lengthM - shifts[i] < 20) return leg;
    const line = slice(leg.line, shifts[i], leg.lengthM);
    return { ...leg, line, lengthM: lengthOf(line), bearingDeg: legBearingDeg(line), stopLineOrigin: "derived" as const };
  });
}
