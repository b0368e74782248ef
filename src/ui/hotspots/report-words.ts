import type { RankedJunction, ScreenQuery, ScreenResult } from "@/domain/screen";
import { counted, formatLength, formatShare, type Units } from "@/ui/format";
import { legPlace } from "@/ui/screens/explain";
import { daysPhrase, EVIDENCE_PHRASES, TURN_PHRASES, windowPhrase, windowPreposition } from "@/ui/screens/phrases";

/** The sentence of the screen that was published, as plain text: nothing in it can be changed any more. */
export function reportSentence(query: ScreenQuery, result: Pick<ScreenResult, "rows" | "basis" | "total">, locale: string): string {
  const { rows, basis, total } = result;
  const when = `On ${daysPhrase(query, basis, locale)}, ${windowPreposition(query)}${windowPhrase(query, basis)}`;
  const where = query.corridor === undefined ? "" : `, along ${rows[0]?.corridor ?? "one corridor"}`;
  const delay = query.minDelay > 0 ? `, delayed by ${query.minDelay} s or more` : "";
  const spill = query.minSpill > 0 ? `, spilling back ${query.minSpill} % of the time or more` : "";
  const name = query.q ? `, named like “${query.q}”` : "";
  const turn = query.turn === "any" ? "" : `, ${TURN_PHRASES[query.turn]} only`;
  return `${when}${where}${turn}${delay}${spill}${name}, with ${EVIDENCE_PHRASES[query.evidence]}: ${rows.length.toLocaleString(locale)} of ${counted(total, "junction", "junctions", locale)}.`;
}

const GRADES: Record<string, string> = {
  A: "hardly any waiting",
  B: "little waiting",
  C: "some waiting",
  D: "noticeable waiting",
  E: "long waiting",
  F: "very long waiting",
};

/** One junction for a reader who does not know the trade's words. */
export function plainFinding(row: RankedJunction, { units, locale }: { units: Units; locale: string }): string {
  if (!row.delay) return "Too few vehicles were seen to say.";
  const [value, low, high] = [row.delay.value, row.delay.low, row.delay.high].map(Math.round);
  const wait = `Drivers lose about ${value} seconds here${low === high ? "" : ` (likely ${low} to ${high})`}: ${GRADES[row.los?.at ?? ""] ?? "waiting"}.`;
  const most = row.worst ? ` Most is lost ${MOST_LOST[row.worst.turn]} ${legPlace(row.worst.from)}, about ${Math.round(row.worst.delayS)} seconds.` : "";
  return wait + most + queueWords(row, units, locale);
}

const MOST_LOST = { left: "turning left", through: "going straight on", right: "turning right", uturn: "turning round" } as const;

function queueWords({ reachM, spill }: RankedJunction, units: Units, locale: string): string {
  if (reachM === null) return "";
  const blocks = spill && spill.value > 0 ? `, and fills its street back to the junction behind ${formatShare(spill.value, locale)} of the time` : "";
  return ` Its longest queue reaches about ${formatLength(reachM, units, locale)}${blocks}.`;
}
