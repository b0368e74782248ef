import { normalRandom, seededRandom } from "./random";

export interface RankIntervals {
  low: Float64Array;
  high: Float64Array;
  /** Mean rank over the draws. */
  expected: Float64Array;
}

const BUCKETS = 8192;
/** Up to so many units are compared one by one, which costs no more than the buckets. */
const FEW = 64;

/**
 * Interval of each unit's rank (1 for the largest) by draws from independent normal posteriors, as league tables
 * need it (Goldstein and Spiegelhalter, JRSS A 159, 1996). `tail` is cut off at each end. The same seed gives the
 * same answer. With more than 64 units, drawn values closer than 1/8192 of their span share a rank.
 * O(draws × (units + 8192)); memory units × units × 2 bytes.
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
  for (let d = 0; d < draws; d++) {
    let [least, most] = [Infinity, -Infinity];
    for (let i = 0; i < units; i++) {
      const x = value[i] + sd[i] * normals[d * units + i];
      drawn[i] = x;
      if (x < least) least = x;
      if (x > most) most = x;
    }
    if (units > FEW) countAboveBuckets(drawn, least, most, bucket, above);
    for (let i = 0; i < units; i++) {
      const better = units > FEW ? above[bucket[i] + 1] : countAbove(drawn, drawn[i]);
      counts[i * units + better] += 1;
    }
  }
  return summarise(counts, units, draws, tail);
}

let lastNormals: { seed: number; values: Float64Array } | null = null;

/** The first `count` numbers of the seed's sequence. The last sequence is kept: every ranking of a city asks for the same one. */
function normalsOf(seed: number, count: number): Float64Array {
  if (lastNormals?.seed !== seed || lastNormals.values.length < count) {
    const normal = normalRandom(seededRandom(seed));
    lastNormals = { seed, values: Float64Array.from({ length: count }, normal) };
  }
  return lastNormals.values;
}

function countAbove(drawn: Float64Array, x: number): number {
  let above = 0;
  for (const other of drawn) if (other > x) above++;
  return above;
}

function bucketOf(x: number, least: number, most: number): number {
  return most > least ? Math.min(BUCKETS - 1, Math.floor(((x - least) / (most - least)) * BUCKETS)) : 0;
}

/** bucket[i]: where value i lies; above[b]: how many values lie in bucket b or higher. */
function countAboveBuckets(drawn: Float64Array, least: number, most: number, bucket: Uint16Array, above: Uint32Array): void {
  above.fill(0);
  for (let i = 0; i < drawn.length; i++) {
    bucket[i] = bucketOf(drawn[i], least, most);
    above[bucket[i]] += 1;
  }
  for (let b = BUCKETS - 1; b >= 0; b--) above[b] += above[b + 1];
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
