import { angleBetweenDeg } from "@/core/geometry/angles";
import { lengthOf, projectPoint, slice } from "@/core/geometry/polyline";
import type { Exit, Leg } from "@/core/types";

/** A leg and an exit of one junction whose bearings are this near to opposite share an arm. */
const SAME_ARM_DEG = 35;
const LEAST_LENGTH_M = 25;
const MOST_SHIFT_M = 45;

/**
 * Lets every exit begin abreast of the stop line of the leg on the same arm, where the junction's box ends, else at
 * the mean distance of the junction's stop lines. Legs that an exit feeds end upstream at the same place,
 * and a storage length that was the leg's whole length follows.
 */
export function placeBoxEdges(legs: Leg[], exits: Exit[]): { legs: Leg[]; exits: Exit[] } {
  const shifts = exits.map((exit) => edgeShift(exit, legs.filter((leg) => leg.junction === exit.junction)));
  const movedExits = exits.map((exit, i) => {
    if (shifts[i] === 0 || isTooShort(exit.lengthM, shifts[i])) return exit;
    const line = slice(exit.line, shifts[i], exit.lengthM);
    return { ...exit, line, lengthM: lengthOf(line) };
  });
  const movedLegs = legs.map((leg) => {
    const shift = leg.upstreamExit >= 0 ? shifts[leg.upstreamExit] : 0;
    const isFixed = leg.locked || leg.origin !== "derived";
    if (shift === 0 || isFixed || isTooShort(leg.lengthM, shift)) return leg;
    const line = slice(leg.line, 0, leg.lengthM - shift);
    const lengthM = lengthOf(line);
    return { ...leg, line, lengthM, storageM: leg.storageM === leg.lengthM ? lengthM : leg.storageM };
  });
  return { legs: movedLegs, exits: movedExits };
}

/** What is short already may grow, but not shrink. */
const isTooShort = (lengthM: number, shift: number): boolean => shift > 0 && lengthM - shift < LEAST_LENGTH_M;

/** How far an exit's beginning has to move outwards along its line, m. */
function edgeShift(exit: Exit, legs: Leg[]): number {
  if (legs.length === 0) return 0;
  const onArm = legs.find((leg) => angleBetweenDeg(leg.bearingDeg + 180, exit.bearingDeg) < SAME_ARM_DEG);
  const shift = onArm ? abreast(exit, onArm.line[0], onArm.line[1]) : meanDistance(legs) - Math.hypot(exit.line[0], exit.line[1]);
  return Math.min(MOST_SHIFT_M, Math.max(-MOST_SHIFT_M, shift));
}

function abreast(exit: Exit, x: number, y: number): number {
  const back = slice(exit.line, -MOST_SHIFT_M, Math.min(exit.lengthM, 2 * MOST_SHIFT_M));
  return projectPoint(back, x, y).at - MOST_SHIFT_M;
}

function meanDistance(legs: Leg[]): number {
  return legs.reduce((sum, leg) => sum + Math.hypot(leg.line[0], leg.line[1]), 0) / legs.length;
}
