import { angleBetweenDeg, compassWord, normaliseDeg } from "@/core/geometry/angles";
import { movePoints } from "@/core/geometry/plane";
import { chordBearingDeg, lengthOf, reversed, simplify } from "@/core/geometry/polyline";
import type { Frame } from "@/core/legs/frame";
import type { Exit, Leg } from "@/core/types";

/**
 * The bearing at a stop line and at an exit is that of the chord over this length, m, from this far off the junction's
 * box on: nearer, those who turn have begun to, and a line learned from pings bends with them.
 */
export const BEARING_CHORD_M = 30;
const BEARING_CLEAR_M = 8;
const SIMPLIFY_M = 0.7;
const DEFAULT_FREE_SPEED_MS = 13.9;

/** A derived leg from its line, stop line first. */
export function draftLeg(frame: Frame, junction: number, line: Float64Array, support: number): Leg {
  const simple = simplify(line, SIMPLIFY_M);
  const bearing = legBearingDeg(simple);
  return {
    id: derivedId(frame, junction, "in", bearing),
    junction,
    name: legName(bearing),
    bearingDeg: bearing,
    line: simple,
    lengthM: lengthOf(simple),
    upstreamExit: -1,
    storageM: NaN,
    freeSpeedMs: DEFAULT_FREE_SPEED_MS,
    speedLimitMs: NaN,
    origin: "derived",
    stopLineOrigin: "default",
    locked: false,
    support,
    doubts: [],
  };
}

/** A derived exit from its line, junction first. */
export function draftExit(frame: Frame, junction: number, line: Float64Array, support: number): Exit {
  const simple = simplify(line, SIMPLIFY_M);
  const bearing = exitBearingDeg(simple);
  return {
    id: derivedId(frame, junction, "out", bearing),
    junction,
    bearingDeg: bearing,
    line: simple,
    lengthM: lengthOf(simple),
    support,
  };
}

export function legBearingDeg(line: Float64Array): number {
  return normaliseDeg(exitBearingDeg(line) + 180);
}

export function exitBearingDeg(line: Float64Array): number {
  const lengthM = lengthOf(line);
  const from = Math.min(BEARING_CLEAR_M, lengthM / 4);
  return chordBearingDeg(line, from, Math.min(from + BEARING_CHORD_M, lengthM));
}

/** "from the south, northbound" for vehicles that travel north. */
export function legName(bearing: number): string {
  return `from the ${compassWord(bearing + 180)}, ${compassWord(bearing)}bound`;
}

export function derivedId(frame: Frame, junction: number, role: "in" | "out", bearing: number): string {
  return `${frame.junctions[junction].id}:${role}:${String(Math.round(bearing) % 360).padStart(3, "0")}`;
}

/** The same street seen from its other end: a line between junctions, turned round and moved to the other's plane. */
export function seenFrom(frame: Frame, line: Float64Array, from: number, to: number): Float64Array {
  return movePoints(reversed(line), frame.planes[from], frame.planes[to]);
}

/** Index of the nearest bearing within `limitDeg`, -1 for none. */
export function nearestBearing(bearings: ArrayLike<number>, wanted: number, limitDeg: number): number {
  let best = -1;
  let least = limitDeg;
  for (let i = 0; i < bearings.length; i++) {
    const angle = angleBetweenDeg(bearings[i], wanted);
    if (angle <= least) {
      least = angle;
      best = i;
    }
  }
  return best;
}

