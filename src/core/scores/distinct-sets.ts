const SLOTS = 128;

/**
 * Small sets of vehicle hashes, one for each movement of a junction, that stop at `enough` members (at most 64, half of
 * the slots). Open addressing; members of earlier rounds are told by their stamp.
 */
export interface DistinctSets {
  /** Empties all sets. O(1). */
  clear(): void;
  /** Adds the values until the set has enough. */
  add(set: number, values: Uint32Array, from: number, to: number): void;
  /** Members of the union of sets `from` to `to`, or `enough`. */
  count(from: number, to: number): number;
}

export function createDistinctSets(sets: number, enough: number): DistinctSets {
  if (enough > SLOTS / 2) throw new RangeError(`At most ${SLOTS / 2} members are counted, got ${enough}.`);
  // The set behind the others is scratch for unions.
  const key = new Uint32Array((sets + 1) * SLOTS);
  const stamp = new Uint32Array((sets + 1) * SLOTS);
  const size = new Uint8Array(sets + 1);
  let now = 1;

  function insert(set: number, value: number): void {
    let slot = (Math.imul(value, 0x9e3779b1) >>> 25) & (SLOTS - 1);
    const base = set * SLOTS;
    while (stamp[base + slot] === now && key[base + slot] !== value) slot = (slot + 1) & (SLOTS - 1);
    if (stamp[base + slot] === now) return;
    stamp[base + slot] = now;
    key[base + slot] = value;
    size[set] += 1;
  }

  function emptyScratch(): void {
    stamp.fill(0, sets * SLOTS);
    size[sets] = 0;
  }

  return {
    clear() {
      now += 1;
      size.fill(0);
    },
    add(set, values, from, to) {
      for (let i = from; i < to && size[set] < enough; i++) insert(set, values[i]);
    },
    count(from, to) {
      for (let set = from; set < to; set++) if (size[set] >= enough) return enough;
      if (to - from === 1) return size[from];
      emptyScratch();
      for (let set = from; set < to; set++) {
        for (let slot = set * SLOTS; slot < (set + 1) * SLOTS && size[sets] < enough; slot++) {
          if (stamp[slot] === now) insert(sets, key[slot]);
        }
      }
      return size[sets];
    },
  };
}
