import { eastM, northM } from "@/core/geometry/plane";
import { lengthOf, pointAt, reversed, simplify } from "@/core/geometry/polyline";
import { draftExit, draftLeg, legName, nearestBearing, seenFrom } from "@/core/legs/draft";
import type { Frame } from "@/core/legs/frame";
import type { Joined } from "@/core/legs/join";
import { LEARNING } from "@/core/legs/learning";
import type { GivenLeg } from "@/core/options";
import type { Leg } from "@/core/types";

/** The upstream end of a drawn line belongs to a junction whose point lies this near, m. */
const MEETS_M = 40;
const SAME_STREET_DEG = 40;

/**
 * Replaces the derived legs of every junction that has drawn ones. A drawn line ends at its stop line; its upstream
 * end is joined to the junction that it starts from. Lines of unknown junctions are left out.
 */
export function applyGivenLegs(joined: Joined, given: readonly GivenLeg[], frame: Frame): Joined {
  const home = new Map(frame.junctions.map((junction, i) => [junction.id, i]));
  const drawn = given.filter((leg) => home.has(leg.junctionId) && leg.lat.length >= 2);
  const replaced = new Set(drawn.map((leg) => home.get(leg.junctionId)));
  const out: Joined = { exits: [...joined.exits], legs: joined.legs.filter((leg) => !replaced.has(leg.junction)) };
  for (const leg of drawn) {
    const junction = home.get(leg.junctionId) as number;
    const old = joined.legs.filter((other) => other.junction === junction);
    out.legs.push(drawLeg(leg, junction, out, old, frame));
  }
  return out;
}

function drawLeg(given: GivenLeg, junction: number, out: Joined, old: Leg[], frame: Frame): Leg {
  const plane = frame.planes[junction];
  const towards = new Float64Array(given.lat.length * 2);
  for (let i = 0; i < given.lat.length; i++) {
    towards[2 * i] = eastM(plane, given.lon[i]);
    towards[2 * i + 1] = northM(plane, given.lat[i]);
  }
  const line = simplify(reversed(towards), 0.3);
  const leg = draftLeg(frame, junction, line, 0);
  const meets = junctionAtEnd(line, junction, frame);
  const like = nearestBearing(old.map((other) => other.bearingDeg), leg.bearingDeg, LEARNING.apartDeg);
  const upstreamExit = meets >= 0 ? exitTowards(leg, meets, out, frame) : like >= 0 ? old[like].upstreamExit : -1;
  return {
    ...leg,
    name: given.name ?? legName(leg.bearingDeg),
    upstreamExit,
    storageM: given.storageM > 0 ? given.storageM : NaN,
    speedLimitMs: given.speedLimitMs,
    origin: "given",
    stopLineOrigin: "given",
    support: like >= 0 ? old[like].support : 0,
  };
}

function junctionAtEnd(line: Float64Array, own: number, frame: Frame): number {
  const [x, y] = pointAt(line, lengthOf(line));
  let meets = -1;
  let nearest = MEETS_M;
  for (const other of frame.near[own]) {
    const distance = Math.hypot(other.x - x, other.y - y);
    if (distance < nearest) {
      nearest = distance;
      meets = other.junction;
    }
  }
  return meets;
}

function exitTowards(leg: Leg, upstream: number, out: Joined, frame: Frame): number {
  const made = draftExit(frame, upstream, seenFrom(frame, leg.line, leg.junction, upstream), leg.support);
  const bearings = out.exits.map((exit) => (exit.junction === upstream ? exit.bearingDeg : NaN));
  const like = nearestBearing(bearings, made.bearingDeg, SAME_STREET_DEG);
  if (like >= 0) return like;
  out.exits.push(made);
  return out.exits.length - 1;
}
