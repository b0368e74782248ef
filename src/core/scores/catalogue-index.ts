import { TURNS, type Turn } from "@/core/types";
import type { Catalogue } from "./types";

/** A catalogue in the order in which scores are added up: movements by junction, then leg, each a dense number. */
export interface CatalogueIndex {
  movements: { key: number; leg: number; junction: number; turn: Turn }[];
  legs: { key: number; junction: number; storageM: number }[];
  junctions: number[];
  /** Movements of junction j: from junctionOffset[j] to junctionOffset[j + 1]. */
  junctionOffset: Uint32Array;
  /** Legs of junction j: from junctionLegOffset[j] to junctionLegOffset[j + 1]. */
  junctionLegOffset: Uint32Array;
  /** Movements of leg l: from legOffset[l] to legOffset[l + 1]. */
  legOffset: Uint32Array;
  /** Dense numbers by dense movement. */
  legOf: Uint32Array;
  junctionOf: Uint32Array;
  turnOf: Uint8Array;
  /** Dense junction by dense leg. */
  junctionOfLeg: Uint32Array;
  movementByKey: ReadonlyMap<number, number>;
  legByKey: ReadonlyMap<number, number>;
  junctionByKey: ReadonlyMap<number, number>;
  /** Movements and legs in order of their keys, for who meets keys in order. */
  movementsInOrder: UnitsInOrder;
  legsInOrder: UnitsInOrder;
}

export interface UnitsInOrder {
  /** Ascending. */
  keys: Uint32Array;
  /** Dense number by place in `keys`. */
  units: Uint32Array;
}

const known = new WeakMap<Catalogue, CatalogueIndex>();

/** Built once for a catalogue object and then remembered; RangeError where a movement names a leg that is not there. */
export function indexCatalogue(catalogue: Catalogue): CatalogueIndex {
  const earlier = known.get(catalogue);
  if (earlier) return earlier;
  const index = build(catalogue);
  known.set(catalogue, index);
  return index;
}

function build(catalogue: Catalogue): CatalogueIndex {
  const movements = [...catalogue.movements].sort((a, b) => a.junction - b.junction || a.leg - b.leg || a.key - b.key);
  const legs = [...catalogue.legs].sort((a, b) => a.junction - b.junction || a.key - b.key);
  const junctions = [...new Set([...movements, ...legs].map((m) => m.junction))].sort((a, b) => a - b);
  const junctionByKey = new Map(junctions.map((key, k) => [key, k]));
  const legByKey = new Map(legs.map((leg, k) => [leg.key, k]));
  const junctionOf = Uint32Array.from(movements, (m) => junctionByKey.get(m.junction)!);
  const legOf = Uint32Array.from(movements, (m) => {
    const leg = legByKey.get(m.leg);
    if (leg === undefined) throw new RangeError(`Movement ${m.key} names leg ${m.leg}, which the catalogue does not list.`);
    return leg;
  });
  const junctionOfLeg = Uint32Array.from(legs, (leg) => junctionByKey.get(leg.junction)!);
  return {
    movements,
    legs,
    junctions,
    junctionLegOffset: offsetsOf(junctionOfLeg, junctions.length),
    junctionOffset: offsetsOf(junctionOf, junctions.length),
    legOffset: offsetsOf(legOf, legs.length),
    legOf,
    junctionOf,
    turnOf: Uint8Array.from(movements, (m) => TURNS.indexOf(m.turn)),
    junctionOfLeg,
    movementByKey: new Map(movements.map((m, k) => [m.key, k])),
    legByKey,
    junctionByKey,
    movementsInOrder: inOrder(movements),
    legsInOrder: inOrder(legs),
  };
}

function inOrder(all: readonly { key: number }[]): UnitsInOrder {
  const units = Uint32Array.from(all, (_, unit) => unit).sort((a, b) => all[a].key - all[b].key);
  return { keys: Uint32Array.from(units, (unit) => all[unit].key), units };
}

function offsetsOf(groups: Uint32Array, count: number): Uint32Array {
  const offsets = new Uint32Array(count + 1);
  for (const g of groups) offsets[g + 1] += 1;
  for (let g = 0; g < count; g++) offsets[g + 1] += offsets[g];
  return offsets;
}
