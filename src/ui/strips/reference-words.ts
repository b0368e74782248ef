import type { ReferenceSource, Turn } from "@/core/types";
import type { MovementView } from "@/domain/junction";
import { formatSeconds } from "@/ui/format";

/** Where a reference time comes from, in full and for a table. */
export const REFERENCE_WORDS: Record<ReferenceSource, string> = {
  unstopped: "from vehicles that did not stop",
  shrunk: "from few vehicles that did not stop, steadied by those of the same turn",
  "free-speed": "from free speed and the turn's geometry",
};

export const REFERENCE_SHORT: Record<ReferenceSource, string> = { unstopped: "unstopped", shrunk: "few unstopped", "free-speed": "free speed" };

const TURNING: Record<Turn, string> = { left: "left", through: "through", right: "right", uturn: "U-turn" };

/** What the delays of a strip are counted against; movements with one source are said together. */
export function referenceSentence(movements: MovementView[], turn: Turn | "any", locale: string): string | null {
  const known = movements.filter((movement) => movement.vehicles > 0 && movement.referenceS !== null && (turn === "any" || movement.turn === turn));
  if (known.length === 0) return null;
  const parts = [...new Set(known.map((movement) => movement.referenceSource))].map((source) => {
    const ofSource = known.filter((movement) => movement.referenceSource === source);
    const times = [...new Set(ofSource.map((movement) => movement.turn))].map((each) => turnTimes(each, ofSource, locale));
    return `${times.join(", ")} (${REFERENCE_WORDS[source]})`;
  });
  return `Delay is the time beyond what an undelayed vehicle needs: ${parts.join("; ")}.`;
}

/** A leg may have two exits for one turn: "right 24 s or 25 s by exit". */
function turnTimes(turn: Turn, movements: MovementView[], locale: string): string {
  const times = new Set(movements.filter((movement) => movement.turn === turn).map((movement) => formatSeconds(movement.referenceS, locale)));
  return `${TURNING[turn]} ${[...times].join(" or ")}${times.size > 1 ? " by exit" : ""}`;
}
