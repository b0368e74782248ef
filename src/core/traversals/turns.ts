import { signedTurnDeg } from "@/core/geometry/angles";
import type { Exit, Leg, Turn } from "@/core/types";

const THROUGH_MOST_DEG = 45;
const UTURN_LEAST_DEG = 155;

/** Signed turns and their names from one leg to each exit of its junction: the straightest exit within 45 degrees is through. */
export function nameTurns(leg: Leg, exits: Exit[]): { turnDeg: number; turn: Turn }[] {
  const angles = exits.map((exit) => signedTurnDeg(leg.bearingDeg, exit.bearingDeg));
  let straightest = -1;
  for (let i = 0; i < angles.length; i++) {
    const isStraight = Math.abs(angles[i]) <= THROUGH_MOST_DEG;
    if (isStraight && (straightest < 0 || Math.abs(angles[i]) < Math.abs(angles[straightest]))) straightest = i;
  }
  return angles.map((turnDeg, i) => ({ turnDeg, turn: turnName(turnDeg, i === straightest) }));
}

function turnName(turnDeg: number, isStraightest: boolean): Turn {
  if (isStraightest) return "through";
  if (Math.abs(turnDeg) >= UTURN_LEAST_DEG) return "uturn";
  return turnDeg > 0 ? "right" : "left";
}
