import type { LegOfCheck, LegToCheck } from "@/domain/leg-check";

const ORIGIN_WORDS = { derived: "found in the pings", given: "drawn in a file", set: "set by an engineer" } as const;

/** Where the leg's line comes from. */
export function originWords(origin: LegToCheck["origin"]): string {
  return ORIGIN_WORDS[origin];
}

/** Where its stop line comes from. */
export function stopLineWords(origin: LegOfCheck["stopLineOrigin"]): string {
  return origin === "default" ? "a default, for want of standing vehicles" : ORIGIN_WORDS[origin];
}

/** What stands beside a leg's name in short: "doubtful", "locked", or where it comes from. */
export function standingWords(leg: Pick<LegToCheck, "doubts" | "locked" | "origin">): string {
  if (leg.locked) return "locked";
  if (leg.doubts.length > 0) return leg.doubts.length === 1 ? "1 doubt" : `${leg.doubts.length} doubts`;
  return originWords(leg.origin);
}
