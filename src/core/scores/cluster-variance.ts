import type { RatioTally } from "./ratio-tally";

/** Fewer days than this cannot speak for the spread between days; neighbouring quarters are compared instead. */
export const LEAST_DAYS_FOR_DAY_CLUSTERS = 3;

export interface ClusterVariance {
  /** Sampling variance of the ratio; NaN where there is only one cluster. */
  variance: number;
  /** Degrees of freedom that it rests on; 0 where there are none. */
  df: number;
  /** Mean size of the cluster that a member finds itself in (Kish, Survey Sampling, 1965). */
  size: number;
}

/**
 * Variance of the unit's ratio total / base when its members hang together within clusters: by days, linearised
 * (Kish 1965, section 6.3); with fewer than three days by the differences between neighbouring quarters of an hour
 * (Wolter, Introduction to Variance Estimation, 1985, section 7.2), which a smooth daily profile does not inflate.
 */
export function clusterVariance(tally: RatioTally, unit: number): ClusterVariance {
  const base = tally.base[unit];
  const ratio = tally.total[unit] / base;
  if (tally.days[unit] >= LEAST_DAYS_FOR_DAY_CLUSTERS) {
    const days = tally.days[unit];
    const squares = tally.dayTT[unit] - 2 * ratio * tally.dayTB[unit] + ratio * ratio * tally.dayBB[unit];
    // Days of unequal size count for fewer.
    const effective = (base * base) / tally.dayBB[unit];
    return {
      variance: (Math.max(0, squares) * days) / ((days - 1) * base * base),
      df: Math.max(0, effective - 1),
      size: tally.dayBB[unit] / base,
    };
  }
  const steps = tally.steps[unit];
  const size = tally.quarterBB[unit] / base;
  if (steps === 0) return { variance: NaN, df: 0, size };
  const squares = tally.stepTT[unit] - 2 * ratio * tally.stepTB[unit] + ratio * ratio * tally.stepBB[unit];
  // Neighbouring differences share a quarter: two thirds of their number is what they are worth.
  return { variance: (Math.max(0, squares) * tally.quarters[unit]) / (2 * steps * base * base), df: (2 * steps) / 3, size };
}
