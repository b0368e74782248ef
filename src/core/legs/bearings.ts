import { normaliseDeg, signedTurnDeg } from "@/core/geometry/angles";
import type { Kept } from "@/core/legs/prune";
import type { Headings, Usage } from "@/core/legs/usage";

/** Weight of the drawn line's own bearing, in headings. */
const LINE_N = 3;

/**
 * Turns the bearing of each derived leg and exit to the mean heading of the vehicles there: with few pings their
 * positions tell a direction over thirty metres worse than their headings do. O(legs and exits).
 */
export function faceTraffic(kept: Kept, usage: Usage, carried: Set<string>): Kept {
  const legs = kept.legs.map((leg, n) => {
    const isFixed = leg.origin !== "derived" || leg.locked || carried.has(leg.id);
    return isFixed ? leg : { ...leg, bearingDeg: facing(usage.legHeadings, kept.legFrom[n], leg.bearingDeg) };
  });
  const exits = kept.exits.map((exit, n) => (carried.has(exit.id) ? exit : { ...exit, bearingDeg: facing(usage.exitHeadings, kept.exitFrom[n], exit.bearingDeg) }));
  return { ...kept, legs, exits };
}

function facing({ count, east, north }: Headings, i: number, lineDeg: number): number {
  if (count[i] === 0) return lineDeg;
  const meanDeg = (Math.atan2(east[i], north[i]) * 180) / Math.PI;
  return normaliseDeg(lineDeg + (signedTurnDeg(lineDeg, meanDeg) * count[i]) / (count[i] + LINE_N));
}
