import { describe, expect, it } from "vitest";
import { keepSettledReferences } from "@/core/traversals/settled";
import type { Movement, Network, Traversals } from "@/core/types";

function movement(id: string, referenceS: number, referenceN: number, cordonUpM = 250): Movement {
  return { id, leg: 0, exit: 0, turnDeg: 0, turn: "through", referenceS, referenceSource: "unstopped", referenceN, cordonUpM, cordonDownM: 60 };
}

const network = (...movements: Movement[]) => ({ junctions: [], legs: [], exits: [], driveSide: "right", movements }) as Network;

function delays(...delayS: number[]): Traversals {
  return { length: delayS.length, movement: Uint32Array.from(delayS.keys()), delayS: Float32Array.from(delayS) } as Traversals;
}

describe("references of earlier files", () => {
  it("keeps a settled one and measures the new file by it", () => {
    const now = network(movement("a", 24, 50));
    const traversals = delays(10);
    keepSettledReferences(now, traversals, network(movement("a", 22, 30)));
    expect(now.movements[0]).toMatchObject({ referenceS: 22, referenceN: 80 });
    // 24 + 10 seconds were driven; against 22 that is a delay of 12.
    expect(traversals.delayS[0]).toBe(12);
  });

  it("joins two thin ones by their numbers", () => {
    const now = network(movement("a", 24, 10));
    const traversals = delays(0);
    keepSettledReferences(now, traversals, network(movement("a", 20, 10)));
    expect(now.movements[0]).toMatchObject({ referenceS: 22, referenceN: 20 });
    expect(traversals.delayS[0]).toBe(2);
  });

  it("starts anew where the cordon moved, where nothing is known, and for a new movement", () => {
    const now = network(movement("a", 24, 10, 200), movement("b", 24, 10), movement("c", 24, 10));
    const traversals = delays(5, 5, 5);
    keepSettledReferences(now, traversals, network(movement("a", 20, 90, 250), movement("b", NaN, 0)));
    expect(now.movements.map(({ referenceS }) => referenceS)).toEqual([24, 24, 24]);
    expect([...traversals.delayS]).toEqual([5, 5, 5]);
  });
});
