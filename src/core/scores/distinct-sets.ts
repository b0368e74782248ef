import { numberOf } from "./day-by-junction";

const SLOTS = 128;

/**
 * Small sets of vehicle hashes, one for each movement of a junction, that stop at `enough` members (at most 64, half of
 * the slots). Open addressing; members of earlier rounds are told by their stamp.
 */
export interface DistinctSets {
  /** Empties all sets, and says which movements will be counted (1 by their number). O(sets). */
  begin(isWanted: Uint8Array): void;
  /** Adds the vehicles of passages `from` to `to` to the sets of wanted movements, until all have enough. */
  addEntries(passed: Uint32Array, vehicle: Uint16Array, from: number, to: number): void;
  /** Members of the union of sets `from` to `to`, or `enough`. */
  count(from: number, to: number): number;
}

export function createDistinctSets(sets: number, enough: number): DistinctSets {
  if (enough > SLOTS / 2) throw new RangeError(`At most ${SLOTS / 2} members are counted, got ${enough}.`);
  // The set behind the others is scratch for unions.
  const key = new Uint32Array((sets + 1) * SLOTS);
  const stamp = new Uint32Array((sets + 1) * SLOTS);
  const members = new Uint32Array((sets + 1) * enough);
  const size = new Uint8Array(sets + 1);
  /** Round in which a set was emptied last. */
  const round = new Uint32Array(sets + 1).fill(1);
  let now = 1;
  /** 1 for sets that take members; how many there are. */
  const isOpen = new Uint8Array(256);
  let open = 0;

  function insert(set: number, value: number): void {
    const base = set * SLOTS;
    let slot = base + (Math.imul(value, 0x9e3779b1) >>> 25);
    while (stamp[slot] === round[set]) {
      if (key[slot] === value) return;
      slot = base + ((slot + 1) & (SLOTS - 1));
    }
    stamp[slot] = round[set];
    key[slot] = value;
    members[set * enough + size[set]] = value;
    size[set] += 1;
  }

  function empty(set: number): void {
    round[set] = ++now;
    size[set] = 0;
  }

  return {
    begin(isWanted) {
      open = 0;
      for (let set = 0; set < sets; set++) {
        empty(set);
        isOpen[set] = isWanted[set];
        open += isWanted[set];
      }
    },
    addEntries(passed, vehicle, from, to) {
      if (open === 0) return;
      for (let i = from; i < to; i++) {
        const set = numberOf(passed[i]);
        if (isOpen[set] === 0) continue;
        insert(set, vehicle[i]);
        if (size[set] < enough) continue;
        isOpen[set] = 0;
        open -= 1;
      }
    },
    count(from, to) {
      for (let set = from; set < to; set++) if (size[set] >= enough) return enough;
      if (to - from === 1) return size[from];
      empty(sets);
      for (let set = from; set < to; set++) {
        for (let k = 0; k < size[set] && size[sets] < enough; k++) insert(sets, members[set * enough + k]);
      }
      return size[sets];
    },
  };
}
