import { angleBetweenDeg } from "@/core/geometry/angles";
import { movePoints, planeAt } from "@/core/geometry/plane";
import { lengthOf } from "@/core/geometry/polyline";
import { exitBearingDeg, legBearingDeg } from "@/core/legs/draft";
import type { Frame } from "@/core/legs/frame";
import type { Joined } from "@/core/legs/join";
import type { Exit, JunctionPoint, Leg, Network } from "@/core/types";

/** A derived and an earlier leg of one junction within this angle are the same leg. */
export const SAME_LEG_DEG = 20;

/** Legs and exits with the earlier ones among them; `carried` holds the ids that stay even when no traffic used them. */
export interface Carried extends Joined {
  carried: Set<string>;
}

/**
 * Brings earlier legs and exits into a fresh draft. They keep id, name and settings. The line comes from whichever
 * knew more trips, except where an engineer locked the leg or set its line. A junction with a drawn or set leg has
 * none but its earlier ones. Earlier junctions are found by their id.
 */
export function carryOver(draft: Joined, prior: Network, frame: Frame): Carried {
  const home = new Map(frame.junctions.map((junction, i) => [junction.id, i]));
  const settled = new Set(prior.legs.filter((leg) => leg.origin !== "derived").map((leg) => home.get(prior.junctions[leg.junction].id)));
  const exits = [...draft.exits];
  const legs = draft.legs.filter((leg) => !settled.has(leg.junction));
  const carried = new Set<string>();
  const exitNow = new Int32Array(prior.exits.length).fill(-1);
  prior.exits.forEach((exit, i) => {
    const junction = home.get(prior.junctions[exit.junction].id);
    if (junction === undefined) return;
    const old = { ...movedExit(exit, prior.junctions[exit.junction], frame, junction), junction };
    const like = nearestLike(exits, old, carried);
    exitNow[i] = like >= 0 ? like : exits.length;
    exits[exitNow[i]] = like >= 0 && exits[like].support > old.support ? { ...exits[like], id: old.id } : old;
    carried.add(old.id);
  });
  prior.legs.forEach((leg) => {
    const junction = home.get(prior.junctions[leg.junction].id);
    if (junction === undefined) return;
    const upstreamExit = leg.upstreamExit >= 0 ? exitNow[leg.upstreamExit] : -1;
    const old: Leg = { ...movedLeg(leg, prior.junctions[leg.junction], frame, junction), junction, upstreamExit };
    const like = nearestLike(legs, old, carried);
    carried.add(old.id);
    if (like < 0) legs.push(old);
    else legs[like] = mergeLeg(old, legs[like]);
  });
  return { legs, exits, carried };
}

function mergeLeg(old: Leg, fresh: Leg): Leg {
  const isFixed = old.locked || old.origin !== "derived" || old.stopLineOrigin === "set";
  if (isFixed || old.support >= fresh.support) {
    return { ...old, upstreamExit: old.upstreamExit >= 0 ? old.upstreamExit : fresh.upstreamExit };
  }
  return { ...fresh, id: old.id, name: old.name, speedLimitMs: old.speedLimitMs, doubts: [] };
}

function nearestLike(items: (Leg | Exit)[], old: Leg | Exit, taken: Set<string>): number {
  let best = -1;
  let least = SAME_LEG_DEG;
  items.forEach((item, i) => {
    if (item.junction !== old.junction || taken.has(item.id)) return;
    const angle = angleBetweenDeg(item.bearingDeg, old.bearingDeg);
    if (angle <= least) {
      least = angle;
      best = i;
    }
  });
  return best;
}

function movedLine(line: Float64Array, from: JunctionPoint, frame: Frame, to: number): Float64Array {
  const point = frame.junctions[to];
  const isSame = from.lat === point.lat && from.lon === point.lon;
  return isSame ? line : movePoints(line, planeAt(from.lat, from.lon), frame.planes[to]);
}

function movedLeg(leg: Leg, from: JunctionPoint, frame: Frame, to: number): Leg {
  const line = movedLine(leg.line, from, frame, to);
  return line === leg.line ? leg : { ...leg, line, lengthM: lengthOf(line), bearingDeg: legBearingDeg(line) };
}

function movedExit(exit: Exit, from: JunctionPoint, frame: Frame, to: number): Exit {
  const line = movedLine(exit.line, from, frame, to);
  return line === exit.line ? exit : { ...exit, line, lengthM: lengthOf(line), bearingDeg: exitBearingDeg(line) };
}
