import { signedTurnDeg } from "../plane";
import type { TrueLeg, Truth } from "../truth/types";
import type { ScreenRow } from "./types";

const SAME_LEG_DEG = 25;

export interface FoundLeg {
  junctionId: string;
  bearingDeg: number;
  rows: ScreenRow[];
}

/** Rows grouped by junction and approach bearing. */
export function groupRows(rows: ScreenRow[]): FoundLeg[] {
  const legs = new Map<string, FoundLeg>();
  for (const row of rows) {
    const key = `${row.junctionId} ${row.approachBearingDeg}`;
    const leg = legs.get(key);
    if (leg) leg.rows.push(row);
    else legs.set(key, { junctionId: row.junctionId, bearingDeg: row.approachBearingDeg, rows: [row] });
  }
  return [...legs.values()];
}

/** Pairs found and true legs of the same junction one to one, nearest bearings first, within 25 degrees. */
export function matchLegs(found: FoundLeg[], truth: Truth): Map<TrueLeg, FoundLeg> {
  const pairs = truth.legs.flatMap((leg) =>
    found
      .filter((candidate) => candidate.junctionId === leg.junctionId)
      .map((candidate) => ({ leg, candidate, offDeg: Math.abs(signedTurnDeg(leg.bearingDeg, candidate.bearingDeg)) })),
  );
  const matched = new Map<TrueLeg, FoundLeg>();
  const taken = new Set<FoundLeg>();
  for (const { leg, candidate, offDeg } of pairs.sort((a, b) => a.offDeg - b.offDeg)) {
    if (offDeg > SAME_LEG_DEG || matched.has(leg) || taken.has(candidate)) continue;
    matched.set(leg, candidate);
    taken.add(candidate);
  }
  return matched;
}
