/** Counts distinct numbers in stretches of a column. Made for one thread of use; the table is reused from call to call. */
export interface DistinctCounter {
  /** Distinct values among `values[from..to)`, or `enough` as soon as there are so many. O(to - from) on average at most. */
  count(values: Uint32Array, from: number, to: number, enough?: number): number;
}

/** `longest` stretch that will be asked for. Open addressing; entries of earlier calls are told by their stamp. */
export function createDistinctCounter(longest: number): DistinctCounter {
  const size = 2 ** Math.ceil(Math.log2(Math.max(16, 2 * longest)));
  const key = new Uint32Array(size);
  const stamp = new Uint32Array(size);
  let now = 0;
  return {
    count(values, from, to, enough = Infinity) {
      now += 1;
      // As small a part of the table as the stretch needs stays in the processor's cache.
      const mask = 2 ** Math.ceil(Math.log2(Math.max(16, 2 * (to - from)))) - 1;
      let found = 0;
      for (let i = from; i < to; i++) {
        const value = values[i];
        let slot = (Math.imul(value, 0x9e3779b1) >>> 7) & mask;
        while (stamp[slot] === now && key[slot] !== value) slot = (slot + 1) & mask;
        if (stamp[slot] === now) continue;
        stamp[slot] = now;
        key[slot] = value;
        found += 1;
        if (found === enough) break;
      }
      return found;
    },
  };
}
