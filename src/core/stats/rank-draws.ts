import { normalRandom, seededRandom } from "./random";

export interface RankIntervals {
  low: Float64Array;
  high: Float64Array;
  /** Mean rank over the draws. */
  expected: Float64Array;
}

const BUCKETS = 4096;
/** Up to so many units are compared one by one, which costs no more than the buckets. */
const FEW = 64;
/** So many draws are counted at a time, unit by unit: a unit's counts are then at hand, where they would else be fetched for each draw. */
const BLOCK = 32;

/**
 * Interval of each unit's rank (1 for the largest) by draws from independent normal posteriors, as league tables
 * need it (Goldstein and Spiegelhalter, JRSS A 159, 1996). `tail` is cut off at each end. The same seed gives the
 * same answer. With more than 64 units, drawn values closer than 1/4096 of their span share the middle of their ranks.
 * O(draws × (units + 4096)); memory units × units × 2 bytes.
 */
export function rankIntervals(
  value: ArrayLike<number>,
  sd: ArrayLike<number>,
  options: { draws: number; seed: number; tail?: number },
): RankIntervals {
  const units = value.length;
  const { draws, tail = 0.025 } = options;
  if (draws > 65_535) throw new RangeError(`At most 65535 draws, got ${draws}.`);
  const normals = normalsOf(options.seed, draws * units);
  // counts[unit * units + rank - 1]: how often the unit had the rank.
  const counts = new Uint16Array(units * units);
  const drawn = new Float64Array(units);
  const bucket = new Uint16Array(units);
  const above = new Uint32Array(BUCKETS + 1);
  const better = new Uint16Array(Math.min(BLOCK, draws) * units);
  for (let first = 0; first < draws; first += BLOCK) {
    const block = Math.min(BLOCK, draws - first);
    for (let d = 0; d < block; d++) {
      let least = Infinity;
      let most = -Infinity;
      for (let i = 0; i < units; i++) {
        const x = value[i] + sd[i] * normals[(first + d) * units + i];
        drawn[i] = x;
        if (x < least) least = x;
        if (x > most) most = x;
      }
      if (units > FEW) countAboveBuckets(drawn, least, most, bucket, above);
      for (let i = 0; i < units; i++) better[d * units + i] = units > FEW ? middleOf(above, bucket[i]) : countAbove(drawn, drawn[i]);
    }
    for (let i = 0; i < units; i++) for (let d = 0; d < block; d++) counts[i * units + better[d * units + i]] += 1;
  }
  return summarise(counts, units, draws, tail);
}

let lastNormals: { seed: number; values: Float64Array } | null = null;

/** The first `count` numbers of the seed's sequence. The last sequence is kept: every ranking of a city asks for the same one. */
function normalsOf(seed: number, count: number): Float64Array {
  if (lastNormals?.seed !== seed || lastNormals.values.length < count) {
    const normal = normalRandom(seededRandom(seed));
    const values = new Float64Array(count);
    for (let k = 0; k < count; k++) values[k] = normal();
    lastNormals = { seed, values };
  }
  return lastNormals.values;
}

function countAbove(drawn: Float64Array, x: number): number {
  let above = 0;
  for (const other of drawn) if (other > x) above++;
  return above;
}

/** How many values are larger than one of those in a bucket, which are taken for evenly spread. */
function middleOf(above: Uint32Array, bucket: number): number {
  return (above[bucket + 1] + above[bucket]) >> 1;
}

/** bucket[i]: where value i lies; above[b]: how many values lie in bucket b or higher. */
function countAboveBuckets(drawn: Float64Array, least: number, most: number, bucket: Uint16Array, above: Uint32Array): void {
  above.fill(0);
  const span = most - least;
  for (let i = 0; i < drawn.length; i++) {
    const place = span > 0 ? Math.min(BUCKETS - 1, Math.floor(((drawn[i] - least) / span) * BUCKETS)) : 0;
    bucket[i] = place;
    above[place] += 1;
  }
  let sum = 0;
  for (let b = BUCKETS - 1; b >= 0; b--) {
    sum += above[b];
    above[b] = sum;
  }
}

function summarise(counts: Uint16Array, units: number, draws: number, tail: number): RankIntervals {
  const low = new Float64Array(units);
  const high = new Float64Array(units);
  const expected = new Float64Array(units);
  for (let i = 0; i < units; i++) {
    let below = 0;
    for (let r = 0; r < units; r++) {
      const count = counts[i * units + r];
      if (count === 0) continue;
      if (below <= tail * draws && below + count > tail * draws) low[i] = r + 1;
      if (below < (1 - tail) * draws && below + count >= (1 - tail) * draws) high[i] = r + 1;
      below += count;
      expected[i] += (count * (r + 1)) / draws;
    }
  }
  return { low, high, expected };
}
