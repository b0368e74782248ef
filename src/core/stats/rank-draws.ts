import { countAbove } from "./competition-ranks";
import { normalRandom, seededRandom } from "./random";

export interface RankIntervals {
  low: Float64Array;
  high: Float64Array;
  /** Mean rank over the draws. */
  expected: Float64Array;
}

/**
 * Interval of each unit's rank (1 for the largest) by draws from independent normal posteriors, as league tables
 * need it (Goldstein and Spiegelhalter, JRSS A 159, 1996). `tail` is cut off at each end. The same seed gives the
 * same answer. O(draws × units × log units); memory units × units × 4 bytes at most.
 */
export function rankIntervals(
  value: ArrayLike<number>,
  sd: ArrayLike<number>,
  options: { draws: number; seed: number; tail?: number },
): RankIntervals {
  const units = value.length;
  const { draws, tail = 0.025 } = options;
  const normal = normalRandom(seededRandom(options.seed));
  // counts[unit * units + rank - 1]: how often the unit had the rank.
  const counts = new Uint16Array(units * units);
  if (draws > 65_535) throw new RangeError(`At most 65535 draws, got ${draws}.`);
  const drawn = new Float64Array(units);
  const sorted = new Float64Array(units);
  for (let d = 0; d < draws; d++) {
    for (let i = 0; i < units; i++) drawn[i] = value[i] + sd[i] * normal();
    sorted.set(drawn);
    sorted.sort();
    for (let i = 0; i < units; i++) counts[i * units + countAbove(sorted, drawn[i])] += 1;
  }
  return summarise(counts, units, draws, tail);
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
