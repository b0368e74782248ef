import { signedTurnDeg } from "@/core/geometry/angles";
import type { Exit, Leg, Turn } from "@/core/types";

const THROUGH_MOST_DEG = 50;
const UTURN_LEAST_DEG = 150;
/** Two exits whose turns differ by no more, with well and with sparsely seen streets, are about as straight: then much more traffic decides. */
export const AS_STRAIGHT_DEG = 2;
export const AS_STRAIGHT_SPARSE_DEG = 8;
const MORE_TRAFFIC = 4;

/**
 * Signed turns and their names from one leg to each exit of its junction: the straightest exit within 50 degrees is
 * through. `traffic` are trips from the leg to each exit, where known.
 */
export function nameTurns(
  leg: Leg, exits: Exit[], traffic?: ArrayLike<number>, asStraightDeg = AS_STRAIGHT_DEG,
): { turnDeg: number; turn: Turn }[] {
  const angles = exits.map((exit) => signedTurnDeg(leg.bearingDeg, exit.bearingDeg));
  let through = -1;
  for (let i = 0; i < angles.length; i++) {
    const isStraight = Math.abs(angles[i]) <= THROUGH_MOST_DEG;
    if (isStraight && (through < 0 || Math.abs(angles[i]) < Math.abs(angles[through]))) through = i;
  }
  if (traffic && through >= 0) through = busiestOfStraight(angles, traffic, through, asStraightDeg);
  return angles.map((turnDeg, i) => ({ turnDeg, turn: turnName(turnDeg, i === through, through >= 0 ? angles[through] : 0) }));
}

function busiestOfStraight(angles: number[], traffic: ArrayLike<number>, straightest: number, asStraightDeg: number): number {
  const limit = Math.min(THROUGH_MOST_DEG, Math.abs(angles[straightest]) + asStraightDeg);
  let best = straightest;
  for (let i = 0; i < angles.length; i++) {
    if (Math.abs(angles[i]) <= limit && traffic[i] > MORE_TRAFFIC * traffic[straightest] && traffic[i] > traffic[best]) best = i;
  }
  return best;
}

function turnName(turnDeg: number, isThrough: boolean, throughDeg: number): Turn {
  if (isThrough) return "through";
  if (Math.abs(turnDeg) >= UTURN_LEAST_DEG) return "uturn";
  return turnDeg > throughDeg ? "right" : "left";
}
