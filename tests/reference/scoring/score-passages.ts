import { signedTurnDeg } from "../plane";
import type { Passage } from "../truth/types";
import type { FoundTraversal, ScoreInput } from "./types";

/** A found traversal belongs to a true passage whose stop line it crosses at about the same time. */
const SAME_PASSAGE_S = 20;
const SAME_LEG_DEG = 25;

/** Complete passages with a ping on the way from cordon to stop line and another between the stop line and the vehicle's next one. */
export function scorablePassages(passages: Passage[], pingTimes: Map<string, number[]>): Passage[] {
  const byVehicle = groupByVehicle(passages);
  return passages.filter((passage) => {
    if (!passage.isComplete) return false;
    const next = byVehicle.get(passage.vehicleId)?.find((other) => other.stopLineMs > passage.stopLineMs);
    const times = pingTimes.get(passage.vehicleId) ?? [];
    return (
      times.some((t) => t >= passage.enterMs && t <= passage.stopLineMs) &&
      times.some((t) => t > passage.stopLineMs && t <= (next?.stopLineMs ?? Infinity))
    );
  });
}

/** Distance of a count from the band that the sample allows. */
export function bandError(found: number, scorable: number, all: number): number {
  return Math.max(0, scorable - found, found - all);
}

export function scoreTraversals(input: ScoreInput, traversals: FoundTraversal[]) {
  const byVehicle = groupByVehicle(input.passages);
  const toleranceMs = Math.max(SAME_PASSAGE_S, input.intervalS * 1.5) * 1000;
  const taken = new Set<Passage>();
  let matched = 0;
  let right = 0;
  for (const traversal of traversals) {
    const passage = (byVehicle.get(traversal.vehicleId) ?? [])
      .filter((candidate) => candidate.junctionId === traversal.junctionId && !taken.has(candidate))
      .sort((a, b) => Math.abs(a.stopLineMs - traversal.stopLineMs) - Math.abs(b.stopLineMs - traversal.stopLineMs))[0];
    if (!passage || Math.abs(passage.stopLineMs - traversal.stopLineMs) > toleranceMs) continue;
    taken.add(passage);
    matched++;
    const sameLeg = Math.abs(signedTurnDeg(passage.approachBearingDeg, traversal.approachBearingDeg)) <= SAME_LEG_DEG;
    if (sameLeg && passage.turn === traversal.turn) right++;
  }
  return { turnsRight: right / matched, falseTraversals: (traversals.length - matched) / traversals.length };
}

function groupByVehicle(passages: Passage[]): Map<string, Passage[]> {
  const groups = new Map<string, Passage[]>();
  for (const passage of passages) {
    const group = groups.get(passage.vehicleId);
    if (group) group.push(passage);
    else groups.set(passage.vehicleId, [passage]);
  }
  for (const group of groups.values()) group.sort((a, b) => a.stopLineMs - b.stopLineMs);
  return groups;
}
