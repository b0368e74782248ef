import { columnsOfLeg } from "./columns-of-leg";
import type { QueueOptions } from "./options";
import type { Standings } from "./standings";

/** Seen vehicles that the city's density counts for beside a leg's own. */
const PRIOR_VEHICLES = 5;
/** Lanes of a queue; their number is not known. */
const ASSUMED_LANES = 2;

/**
 * Seen vehicles per metre of standing column, by leg: Σ(n - 1) / Σ reach, since the last of a column marks its own
 * reach (see `penetrationFromQueues`); drawn to the city's where a leg has few. `offset[leg]` to `offset[leg + 1]` are
 * its standings. NaN where nobody stood behind anybody in the whole city. O(standings × log).
 */
export function seenPerMetre(standings: Standings, offset: Uint32Array, options: QueueOptions): Float64Array {
  return perMetreOf(columnSums(standings, offset, options));
}

/** What the standing columns of each leg add up to: vehicles before the last one, and reach. */
export interface ColumnSums {
  ahead: Float64Array;
  reachM: Float64Array;
}

/** First half of `seenPerMetre`, leg by leg. */
export function columnSums(standings: Standings, offset: Uint32Array, options: QueueOptions): ColumnSums {
  const legs = offset.length - 1;
  const ahead = new Float64Array(legs);
  const reachM = new Float64Array(legs);
  for (let leg = 0; leg < legs; leg++) {
    for (const column of columnsOfLeg(standings, offset[leg], offset[leg + 1], options)) {
      ahead[leg] += column.seen - 1;
      reachM[leg] += column.reachM;
    }
  }
  return { ahead, reachM };
}

/** Second half of `seenPerMetre`: needs the sums of all legs of the city. */
export function perMetreOf({ ahead, reachM }: ColumnSums): Float64Array {
  const sum = (values: Float64Array): number => values.reduce((total, value) => total + value, 0);
  const city = sum(ahead) / sum(reachM);
  return ahead.map((n, leg) => (city > 0 ? (n + PRIOR_VEHICLES) / (reachM[leg] + PRIOR_VEHICLES / city) : NaN));
}

/**
 * Metres a second by which a queue is expected to grow behind the last seen vehicle while it stands: a model.
 *
 * Comert and Cetin (EJOR 197, 2009) expect (1 - p) λ τ vehicles behind the last seen one, τ after it joined. Vehicles
 * of the sample arrive at p λ and stand κ to the metre: the queue grows by their ratio, whatever p and the number of
 * lanes are. 1 - p, that nobody seen was among them, is taken for one lane.
 */
export function tailGrowthMs(seenPerSecond: number, perMetre: number, options: QueueOptions): number {
  if (!(perMetre > 0)) return 0;
  return (seenPerSecond / perMetre) * Math.max(0, 1 - perMetre * options.jamSpacingM);
}

/**
 * Road that the unseen part of the queue behind standing `k` is expected to take at `tMs`, at most `mostM`; NaN once the
 * discharge, which leaves the seen vehicle at its departure and runs upstream at the wave speed, has come to its end.
 */
export function expectedBehindM(standings: Standings, k: number, tMs: number, growthMs: number, mostM: number, options: QueueOptions): number {
  const behindM = Math.min(mostM, (growthMs * (tMs - standings.joinedMs[k])) / 1000);
  const dischargedM = (options.waveSpeedMs * (tMs - standings.toMs[k])) / 1000;
  return dischargedM <= behindM ? behindM : NaN;
}

/**
 * Road that the unseen part takes where it is longer than expected by one standard deviation, as the longest of a
 * quarter's queues is: arrivals are counted as Poisson's, and two lanes are assumed to share the road.
 */
export function longestBehindM(behindM: number, mostM: number, options: QueueOptions): number {
  return Math.min(mostM, behindM + Math.sqrt((behindM * options.jamSpacingM) / ASSUMED_LANES));
}

/**
 * Options of one leg's column. Between seen vehicles of a column that hangs together, gaps are spread exponentially with
 * mean 1 / `perMetre`; the widest that counts is the one that a gap stays below 99 times in 100, within the limits for
 * a few vehicles (`gapM`, `headM`) and for all of them.
 */
export function columnOptions(options: QueueOptions, perMetre: number): QueueOptions {
  if (!(perMetre > 0)) return options;
  const widestM = Math.log(100) / perMetre;
  return {
    ...options,
    gapM: Math.min(options.gapM, Math.max(options.gapAllM, widestM)),
    headM: Math.min(options.headM, Math.max(options.headAllM, widestM)),
  };
}
