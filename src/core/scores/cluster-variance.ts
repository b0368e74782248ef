import type { RatioTally } from "./ratio-tally";

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
 * (Kish 1965, section 6.3); or by the differences between neighbouring quarters of an hour (Wolter, Introduction to
 * Variance Estimation, 1985, section 7.2), which a smooth daily profile does not inflate.
 */
export function clusterVariance(tally: RatioTally, unit: number): ClusterVariance {
  const base = tally.base[unit];
  const ratio = tally.total[unit] / base;
  const count = tally.count[unit];
  const size = tally.baseSq[unit] / base;
  const squares = Math.max(0, tally.tt[unit] - 2 * ratio * tally.tb[unit] + ratio * ratio * tally.bb[unit]);
  if (tally.clusters === "days") {
    if (count < 2) return { variance: NaN, df: 0, size };
    // Days of unequal size count for fewer.
    const effective = (base * base) / tally.baseSq[unit];
    return { variance: (squares * count) / ((count - 1) * base * base), df: effective - 1, size };
  }
  const steps = tally.steps[unit];
  if (steps === 0) return { variance: NaN, df: 0, size };
  // Neighbouring differences share a quarter: two thirds of their number is what they are worth.
  return { variance: (squares * count) / (2 * steps * base * base), df: (2 * steps) / 3, size };
}
