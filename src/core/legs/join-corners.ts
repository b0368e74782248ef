import { angleBetweenDeg } from "@/core/geometry/angles";
import { chordBearingDeg, lengthOf, simplify } from "@/core/geometry/polyline";
import { seenFrom } from "@/core/legs/draft";
import type { Frame } from "@/core/legs/frame";
import type { Joined } from "@/core/legs/join";
import { LEARNING } from "@/core/legs/learning";

/** Settings of streets whose two traces end at the same corner. */
export const CORNERS = Object.freeze({
  /** Gap between the ends that is still one corner, m. */
  gapM: 35,
  /** Sharper turns are no bend of a street, degrees. */
  sharpestDeg: 120,
  /** Chord that tells a trace's direction at its end, m. */
  chordM: 30,
  simplifyM: 0.7,
});

/**
 * Joins an exit that ends in the open with a leg that begins in the open at the same place: a street with a corner
 * that was traced from both of its junctions, but round the corner from neither. Without the link every path along the
 * street is lost. The nearest ends first; `joined` is changed in place. O(open legs x open exits).
 */
export function joinCorners(joined: Joined, frame: Frame): void {
  const fed = new Set(joined.legs.map((leg) => leg.upstreamExit));
  const pairs = joined.legs.flatMap((leg, l) =>
    leg.upstreamExit >= 0 ? [] : joined.exits.flatMap((_, e) => (fed.has(e) ? [] : cornerOf(joined, l, e, frame))),
  );
  pairs.sort((a, b) => a.gapM - b.gapM || a.leg - b.leg || a.exit - b.exit);
  for (const { leg: l, exit: e, line } of pairs) {
    if (joined.legs[l].upstreamExit >= 0 || fed.has(e)) continue;
    fed.add(e);
    const leg = joined.legs[l];
    const exit = joined.exits[e];
    const back = seenFrom(frame, line, leg.junction, exit.junction);
    joined.legs[l] = { ...leg, line, lengthM: lengthOf(line), upstreamExit: e };
    joined.exits[e] = { ...exit, line: back, lengthM: lengthOf(back) };
  }
}

interface Corner {
  leg: number;
  exit: number;
  gapM: number;
  /** From the leg's stop line to the exit's junction, in the leg's plane. */
  line: Float64Array;
}

function cornerOf(joined: Joined, l: number, e: number, frame: Frame): Corner[] {
  const leg = joined.legs[l];
  const exit = joined.exits[e];
  if (!frame.near[leg.junction].some((near) => near.junction === exit.junction)) return [];
  const rest = seenFrom(frame, exit.line, exit.junction, leg.junction);
  const n = leg.line.length;
  const gapM = Math.hypot(rest[0] - leg.line[n - 2], rest[1] - leg.line[n - 1]);
  if (gapM > CORNERS.gapM || leg.lengthM + gapM + exit.lengthM > LEARNING.traceMostM) return [];
  // Both lines run upstream here.
  const before = chordBearingDeg(leg.line, Math.max(0, leg.lengthM - CORNERS.chordM), leg.lengthM);
  const after = chordBearingDeg(rest, 0, Math.min(CORNERS.chordM, exit.lengthM));
  if (angleBetweenDeg(before, after) > CORNERS.sharpestDeg) return [];
  return [{ leg: l, exit: e, gapM, line: simplify(Float64Array.from([...leg.line, ...rest]), CORNERS.simplifyM) }];
}
