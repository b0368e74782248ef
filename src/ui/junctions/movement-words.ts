import type { ExitView, LegView, MovementView } from "@/domain/junction";
import { compassPoint } from "@/ui/format";
import { TURN_WORDS } from "@/ui/screens/phrases";

type NamedMovement = Pick<MovementView, "id" | "turn" | "exitId">;

/** "right", or "right, leaving south-westbound" where a leg has two movements of that turn. */
export function movementWords(movement: NamedMovement, ofLeg: readonly NamedMovement[], exits: readonly ExitView[]): string {
  const isAlone = ofLeg.every((other) => other.id === movement.id || other.turn !== movement.turn);
  const exit = exits.find((candidate) => candidate.id === movement.exitId);
  if (isAlone || !exit) return TURN_WORDS[movement.turn];
  return `${TURN_WORDS[movement.turn]}, leaving ${compassPoint(exit.bearingDeg)}bound`;
}

/** "from the south", with its degrees where the name tells two legs apart by them: "from the south (20°)". */
export function shortLegName(leg: Pick<LegView, "name">): string {
  const [from, ...rest] = leg.name.split(",");
  const degrees = /\(\d+°\)/.exec(rest.join(","));
  return degrees ? `${from} ${degrees[0]}` : from;
}
