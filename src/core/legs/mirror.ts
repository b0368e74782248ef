import { angleBetweenDeg, bearingDeg } from "@/core/geometry/angles";
import { draftExit, draftLeg } from "@/core/legs/draft";
import type { Frame } from "@/core/legs/frame";
import type { Joined } from "@/core/legs/join";
import type { DriveSide, Exit, Leg } from "@/core/types";

/** Between the middles of both directions of a street, m. */
const APART_M = 6;
const SAME_ARM_DEG = 35;
const RAD = Math.PI / 180;

/**
 * With sparse pings one direction of a street may show and the other not. Proposes for every exit without a leg on its
 * arm the leg that comes back beside it, and the other way round; matched traffic decides whether they stay.
 */
export function mirrorArms(joined: Joined, frame: Frame, driveSide: DriveSide): Joined {
  const legs = [...joined.legs];
  const exits = [...joined.exits];
  const isPaired = (leg: Leg, exit: Exit): boolean =>
    leg.junction === exit.junction && angleBetweenDeg(leg.bearingDeg + 180, exit.bearingDeg) < SAME_ARM_DEG;
  for (const leg of joined.legs) {
    if (joined.exits.some((exit) => isPaired(leg, exit))) continue;
    exits.push(draftExit(frame, leg.junction, besideLine(leg.line, driveSide, true), 0));
  }
  for (const exit of joined.exits) {
    if (joined.legs.some((leg) => isPaired(leg, exit))) continue;
    legs.push(draftLeg(frame, exit.junction, besideLine(exit.line, driveSide, false), 0));
  }
  return { legs, exits };
}

/**
 * The line of the other direction, drawn the same way from the junction outwards. Seen outwards, traffic that leaves
 * keeps to the side of driving and traffic that comes to the other.
 */
function besideLine(line: Float64Array, driveSide: DriveSide, isForExit: boolean): Float64Array {
  const toRight = (driveSide === "right") === isForExit;
  const shift = toRight ? APART_M : -APART_M;
  const out = new Float64Array(line.length);
  for (let i = 0; i < line.length; i += 2) {
    const a = Math.max(0, i - 2);
    const b = Math.min(line.length - 2, i + 2);
    const bearing = bearingDeg(line[b] - line[a], line[b + 1] - line[a + 1]) * RAD;
    out[i] = line[i] + shift * Math.cos(bearing);
    out[i + 1] = line[i + 1] - shift * Math.sin(bearing);
  }
  return out;
}
