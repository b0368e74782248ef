import { CROSSING } from "@/core/traversals/extract";
import { nameTurns } from "@/core/traversals/turns";
import type { Movement, Network } from "@/core/types";

/**
 * Every pair of a leg and an exit of one junction as a movement, with its turn and its cordons. `trips` says how many
 * went from a leg to an exit, by their indices, where that is known.
 */
export function listMovements(
  network: Omit<Network, "movements">, trips?: (leg: number, exit: number) => number, asStraightDeg?: number,
): Movement[] {
  const exitsOf: number[][] = network.junctions.map(() => []);
  network.exits.forEach((exit, i) => exitsOf[exit.junction].push(i));
  const room = exitRoom(network);
  const movements: Movement[] = [];
  network.legs.forEach((leg, l) => {
    const exits = exitsOf[leg.junction];
    const names = nameTurns(leg, exits.map((e) => network.exits[e]), trips && exits.map((e) => trips(l, e)), asStraightDeg);
    exits.forEach((e, n) => {
      movements.push({
        id: `${leg.id}>${network.exits[e].id}`,
        leg: l,
        exit: e,
        turnDeg: names[n].turnDeg,
        turn: names[n].turn,
        referenceS: NaN,
        referenceSource: "free-speed",
        referenceN: 0,
        cordonUpM: Math.min(CROSSING.cordonUpM, leg.lengthM),
        cordonDownM: Math.min(CROSSING.cordonDownM, room[e]),
      });
    });
  });
  return movements;
}

/** Half the way to the next junction for each exit; its whole length where it leads into the open. */
function exitRoom(network: Omit<Network, "movements">): Float64Array {
  const room = Float64Array.from(network.exits, (exit) => exit.lengthM);
  const halved = new Uint8Array(room.length);
  for (const leg of network.legs) {
    if (leg.upstreamExit < 0) continue;
    const half = leg.lengthM / 2;
    room[leg.upstreamExit] = halved[leg.upstreamExit] ? Math.min(room[leg.upstreamExit], half) : half;
    halved[leg.upstreamExit] = 1;
  }
  return room;
}
