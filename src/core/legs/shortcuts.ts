import { eastM, northM, planeAt } from "@/core/geometry/plane";
import type { Usage } from "@/core/legs/usage";
import type { Network } from "@/core/types";

/** A link this short may be a corner cut off another junction. */
const SHORT_M = 70;
/** The corner lies this near to the link, and the way round it is at most this much longer. */
const CORNER_M = 30;
const DETOUR = 1.5;

/**
 * Short links between two junctions that cut the corner of a third: sparse pings of vehicles that drive round it suggest
 * them. Both links round the corner must be busier. Indices of the legs. O(legs of linked junctions).
 */
export function findShortcuts(draft: Network, usage: Usage): Set<number> {
  const from = draft.legs.map((leg) => (leg.upstreamExit >= 0 ? draft.exits[leg.upstreamExit].junction : -1));
  const legsOf: number[][] = draft.junctions.map(() => []);
  draft.legs.forEach((leg, i) => legsOf[leg.junction].push(i));
  const out = new Set<number>();
  draft.legs.forEach((leg, i) => {
    if (from[i] < 0 || leg.lengthM > SHORT_M) return;
    for (const last of legsOf[leg.junction]) {
      const corner = from[last];
      if (last === i || corner < 0 || corner === from[i]) continue;
      const first = legsOf[corner].find((k) => from[k] === from[i]);
      if (first === undefined || Math.min(usage.leg[first], usage.leg[last]) <= usage.leg[i]) continue;
      if (isCorner(draft, from[i], corner, leg.junction)) out.add(i);
    }
  });
  return out;
}

function isCorner(draft: Network, a: number, corner: number, b: number): boolean {
  const plane = planeAt(draft.junctions[a].lat, draft.junctions[a].lon);
  const at = (j: number): [number, number] => [eastM(plane, draft.junctions[j].lon), northM(plane, draft.junctions[j].lat)];
  const [bx, by] = at(b);
  const [cx, cy] = at(corner);
  const length = Math.hypot(bx, by);
  const beside = Math.abs(cx * by - cy * bx) / length;
  const round = Math.hypot(cx, cy) + Math.hypot(bx - cx, by - cy);
  return beside < CORNER_M && round < DETOUR * length;
}
