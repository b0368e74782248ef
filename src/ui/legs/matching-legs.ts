import type { LegToCheck } from "@/domain/leg-check";

export const LEG_CHOICES = ["all", "doubtful", "locked"] as const;
export type LegChoice = (typeof LEG_CHOICES)[number];

/** Legs of the choice in whose name or junction every word of the search occurs; capitals and accents do not matter. */
export function matchingLegs(legs: LegToCheck[], show: LegChoice, search: string): LegToCheck[] {
  const words = plain(search).split(/\s+/).filter(Boolean);
  return legs.filter((leg) => {
    if (show === "doubtful" && leg.doubts.length === 0) return false;
    if (show === "locked" && !leg.locked) return false;
    if (words.length === 0) return true;
    const text = plain(`${leg.junction.name} ${leg.junction.code} ${leg.name}`);
    return words.every((word) => text.includes(word));
  });
}

function plain(text: string): string {
  return text.normalize("NFD").replace(/\p{Diacritic}/gu, "").toLowerCase();
}
