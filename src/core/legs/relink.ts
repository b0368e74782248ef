import { lengthOf, pointAt, simplify, slice } from "@/core/geometry/polyline";
import { legBearingDeg, seenFrom } from "@/core/legs/draft";
import type { Frame } from "@/core/legs/frame";
import { LEARNING } from "@/core/legs/learning";
import type { Usage } from "@/core/legs/usage";
import type { Exit, Leg, Network } from "@/core/types";

/** Settings of legs that hang on the wrong exit, or on none. */
export const RELINKING = Object.freeze({
  /** Fewest trips that drove from the exit to the leg, how many times as many as came by the exit that it hangs on, and share of all who passed its stop line. */
  leastTrips: 2,
  timesFed: 2,
  share: 0.5,
  /** Gap between the two lines that is still one street, m. */
  gapM: 60,
  stepM: 10,
  simplifyM: 0.7,
});

/**
 * A trace may pass beside a junction or follow another street to it; then paths break off on an exit and begin anew on
 * a leg. Where several trips do the same, and few came by the exit on which the leg hangs, the leg is hung on theirs:
 * its line goes over to the exit's where both are nearest. Null where no leg is concerned. O(broken pairs × line²).
 */
export function relinkBroken(draft: Network, usage: Usage, carried: Set<string>, frame: Frame): Network | null {
  const legs = [...draft.legs];
  const exits = [...draft.exits];
  const pairs = [...usage.broken].map(([key, trips]) => ({ exit: Math.floor(key / legs.length), leg: key % legs.length, trips }));
  pairs.sort((a, b) => b.trips - a.trips || a.leg - b.leg || a.exit - b.exit);
  const done = new Set<number>();
  for (const { exit: e, leg: l, trips } of pairs) {
    const leg = draft.legs[l];
    const isFixed = leg.origin !== "derived" || leg.locked || carried.has(leg.id);
    const least = Math.max(RELINKING.leastTrips, RELINKING.timesFed * usage.fed[l], RELINKING.share * usage.leg[l]);
    if (trips < least || done.has(l) || isFixed) continue;
    const line = joinedLine(leg, draft.exits[e], frame);
    if (!line) continue;
    done.add(l);
    legs[l] = { ...leg, line, lengthM: lengthOf(line), bearingDeg: legBearingDeg(line), upstreamExit: e };
  }
  return done.size > 0 ? { ...draft, legs, exits } : null;
}

/** From the stop line along the leg, over the narrowest gap, back along the exit; null where they lie too far apart. */
function joinedLine(leg: Leg, exit: Exit, frame: Frame): Float64Array | null {
  if (leg.junction === exit.junction || !frame.near[leg.junction].some((near) => near.junction === exit.junction)) return null;
  const back = seenFrom(frame, exit.line, exit.junction, leg.junction);
  const backM = lengthOf(back);
  let least: number = RELINKING.gapM;
  let cut: [number, number] | null = null;
  for (let s = 0; s <= leg.lengthM; s += RELINKING.stepM) {
    const [x, y] = pointAt(leg.line, s);
    for (let at = 0; at <= backM; at += RELINKING.stepM) {
      const [bx, by] = pointAt(back, at);
      const gapM = Math.hypot(bx - x, by - y);
      if (gapM >= least || s + gapM + backM - at > LEARNING.traceMostM) continue;
      least = gapM;
      cut = [s, at];
    }
  }
  if (!cut) return null;
  const [s, at] = cut;
  const own = s > 0 ? slice(leg.line, 0, s) : leg.line.slice(0, 2);
  return simplify(Float64Array.from([...own, ...slice(back, at, backM)]), RELINKING.simplifyM);
}
