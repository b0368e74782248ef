import { angleBetweenDeg } from "@/core/geometry/angles";
import { projectPoint } from "@/core/geometry/polyline";
import { draftExit, draftLeg, nearestBearing, seenFrom } from "@/core/legs/draft";
import type { Frame } from "@/core/legs/frame";
import { joinCorners } from "@/core/legs/join-corners";
import { LEARNING } from "@/core/legs/learning";
import type { Arm } from "@/core/legs/trace";
import type { Exit, Leg } from "@/core/types";

/** How far the bearings of a leg's upstream end and of an exit may differ to be one street. */
const SAME_STREET_DEG = 30;
/** Streets to two junctions that leave this far apart are two. */
const APART_DEG = 18;
/** A trace that stopped short may be prolonged straight by this much to the next junction, m. */
const PROLONG_M = 350;
/** Two traces of one street lie this near to each other, m. */
const ASIDE_M = 30;

export interface Joined {
  legs: Leg[];
  exits: Exit[];
}

/**
 * Turns traced arms into legs and exits and joins both ends of each street: a leg traced back to another junction
 * hangs on that junction's exit, which is made where it is missing, and the other way round.
 */
export function joinArms(arms: Arm[], frame: Frame): Joined {
  const joined: Joined = { legs: [], exits: [] };
  const inbound = arms.filter((arm) => arm.inbound).map((arm) => prolong(arm, frame));
  const outbound = arms.filter((arm) => !arm.inbound).map((arm) => prolong(arm, frame));
  for (const arm of outbound) joined.exits.push(draftExit(frame, arm.junction, Float64Array.from(arm.line), arm.support));
  for (const arm of inbound) joined.legs.push(draftLeg(frame, arm.junction, Float64Array.from(arm.line), arm.support));
  inbound.forEach((arm, i) => {
    if (arm.meets >= 0) hangLeg(joined, joined.legs[i], arm.meets, frame);
  });
  outbound.forEach((arm, i) => {
    if (arm.meets >= 0) feedLeg(joined, i, arm.meets, frame);
  });
  joinCorners(joined, frame);
  return joined;
}

/** Finds or makes the exit of `upstream` that feeds a leg, and gives it the leg's line. */
function hangLeg(joined: Joined, leg: Leg, upstream: number, frame: Frame): void {
  const line = seenFrom(frame, leg.line, leg.junction, upstream);
  const made = draftExit(frame, upstream, line, leg.support);
  const like = exitLike(joined, upstream, made.bearingDeg);
  const exit = like >= 0 && leadsElsewhere(joined, like, leg.junction, made) ? -1 : like;
  if (exit < 0) {
    joined.exits.push(made);
    leg.upstreamExit = joined.exits.length - 1;
  } else {
    leg.upstreamExit = exit;
    joined.exits[exit] = { ...made, support: Math.max(made.support, joined.exits[exit].support) };
  }
}

/** Makes sure that an exit traced to another junction feeds one of its legs. */
function feedLeg(joined: Joined, exit: number, downstream: number, frame: Frame): void {
  if (joined.legs.some((leg) => leg.upstreamExit === exit)) return;
  const from = joined.exits[exit].junction;
  const line = seenFrom(frame, joined.exits[exit].line, from, downstream);
  const made = draftLeg(frame, downstream, line, joined.exits[exit].support);
  const candidates = joined.legs.map((leg) => (leg.junction === downstream ? leg.bearingDeg : NaN));
  const like = nearestBearing(candidates, made.bearingDeg, LEARNING.apartDeg);
  if (like < 0) joined.legs.push({ ...made, upstreamExit: exit });
  else if (joined.legs[like].upstreamExit < 0 && leadsAlong(made.line, joined.legs[like].line)) {
    const leg = joined.legs[like];
    joined.legs[like] = { ...made, support: Math.max(made.support, leg.support), upstreamExit: exit };
  }
}

/** Whether a leg's own trace ends beside the line of the exit that might feed it: else they part at a fork. */
function leadsAlong(line: Float64Array, own: Float64Array): boolean {
  const { offset } = projectPoint(line, own[own.length - 2], own[own.length - 1]);
  return Math.abs(offset) <= ASIDE_M;
}

/** Whether an exit already feeds a leg of another junction, and its street leaves in a direction of its own. */
function leadsElsewhere(joined: Joined, exit: number, downstream: number, made: Exit): boolean {
  const isOther = joined.legs.some((leg) => leg.upstreamExit === exit && leg.junction !== downstream);
  return isOther && angleBetweenDeg(joined.exits[exit].bearingDeg, made.bearingDeg) > APART_DEG;
}

function exitLike(joined: Joined, junction: number, bearing: number): number {
  const bearings = joined.exits.map((exit) => (exit.junction === junction ? exit.bearingDeg : NaN));
  return nearestBearing(bearings, bearing, SAME_STREET_DEG);
}

/** Carries a trace that ended in the open straight on to a junction that lies ahead. */
function prolong(arm: Arm, frame: Frame): Arm {
  if (arm.meets >= 0) return arm;
  const n = arm.line.length;
  if (n < 4) return arm;
  const back = Math.max(0, n - 8);
  const x = arm.line[n - 2];
  const y = arm.line[n - 1];
  const length = Math.hypot(x - arm.line[back], y - arm.line[back + 1]) || 1;
  const ux = (x - arm.line[back]) / length;
  const uy = (y - arm.line[back + 1]) / length;
  let nearest = PROLONG_M;
  let meets = -1;
  for (const other of frame.near[arm.junction]) {
    const along = (other.x - x) * ux + (other.y - y) * uy;
    const side = Math.abs((other.x - x) * uy - (other.y - y) * ux);
    if (along > 0 && along < nearest && side < 12 + 0.1 * along) {
      nearest = along;
      meets = other.junction;
    }
  }
  if (meets < 0) return arm;
  const other = frame.near[arm.junction].find((near) => near.junction === meets);
  if (!other) return arm;
  const distance = Math.hypot(other.x - x, other.y - y);
  const share = Math.max(0, distance - LEARNING.boxM) / distance;
  const line = [...arm.line, x + share * (other.x - x), y + share * (other.y - y)];
  return { ...arm, line, meets };
}
