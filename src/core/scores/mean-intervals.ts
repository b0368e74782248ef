import { studentT975 } from "@/core/stats/student-t";
import { clusterVariance, type ClusterVariance } from "./cluster-variance";
import { peerSpread, PEER_SPREAD_DF, squaresWithin } from "./peer-spread";
import type { RatioTally } from "./ratio-tally";

/** Weight of the peers' design effect beside the unit's own clusters. */
const PEER_DESIGN_DF = 8;
/** Rounding of one delay, s²: the variance of a mean is never below it divided by n. */
const LEAST_VARIANCE = 0.25;

export interface MeanIntervals {
  /** All NaN where the unit has no traversal. */
  value: Float64Array;
  low: Float64Array;
  high: Float64Array;
  /** Sampling variance of the mean. */
  variance: Float64Array;
  /** Traversals that as many independent ones would be worth. */
  effective: Float64Array;
}

/**
 * Mean delay of each unit with a 95 % interval that holds for traversals which hang together by day and queue; how
 * many vehicles they are of counts in the evidence grade. `sumSq` are the sums of squared delays, `group` the peers (a small whole number for each unit).
 *
 * Three steps, each shrinking a variance to that of peers as Smyth does (Statistical Applications in Genetics and
 * Molecular Biology 3, 2004): spread of single delays to the peers' spread; design effect 1 + (m - 1) ρ with the
 * peers' ρ for clusters of size m (Kish 1965); and that to the variance between the unit's own clusters. O(units).
 */
export function meanIntervals(tally: RatioTally, sumSq: Float64Array, group: ArrayLike<number>): MeanIntervals {
  const units = tally.base.length;
  const spread = peerSpread(tally, sumSq, group);
  const own: ClusterVariance[] = [];
  const single = new Float64Array(units);
  for (let u = 0; u < units; u++) {
    own.push(clusterVariance(tally, u));
    const n = tally.base[u];
    const squares = PEER_SPREAD_DF * spread[u] + squaresWithin(tally, sumSq, u);
    single[u] = Math.max(LEAST_VARIANCE, squares / (PEER_SPREAD_DF + n - 1)) / n;
  }
  const rho = peerCorrelation(own, single, tally);
  const out: MeanIntervals = {
    value: new Float64Array(units).fill(NaN),
    low: new Float64Array(units).fill(NaN),
    high: new Float64Array(units).fill(NaN),
    variance: new Float64Array(units).fill(NaN),
    effective: new Float64Array(units),
  };
  for (let u = 0; u < units; u++) fillUnit(out, u, tally, own[u], single[u], rho);
  return out;
}

function fillUnit(out: MeanIntervals, u: number, tally: RatioTally, own: ClusterVariance, single: number, rho: number): void {
  const n = tally.base[u];
  if (!(n > 0)) return;
  out.value[u] = tally.total[u] / n;
  const expected = single * (1 + Math.max(0, own.size - 1) * rho);
  const ownDf = own.df > 0 ? own.df : 0;
  const ownSquares = ownDf > 0 ? ownDf * own.variance : 0;
  const variance = (PEER_DESIGN_DF * expected + ownSquares) / (PEER_DESIGN_DF + ownDf);
  const df = Math.min(PEER_DESIGN_DF + ownDf, PEER_SPREAD_DF + n - 1);
  const half = studentT975(df) * Math.sqrt(variance);
  out.variance[u] = variance;
  out.effective[u] = n / Math.max(1, variance / single);
  out.low[u] = out.value[u] - half;
  out.high[u] = out.value[u] + half;
}

/** ρ of the peers: by how much variances between clusters exceed those of independent members, for members at hand. */
function peerCorrelation(own: ClusterVariance[], single: Float64Array, tally: RatioTally): number {
  let excess = 0;
  let members = 0;
  for (let u = 0; u < own.length; u++) {
    const { variance, df, size } = own[u];
    if (!(df >= 1) || !(size > 1) || !(tally.base[u] >= 10) || !(single[u] > 0)) continue;
    excess += df * (variance / single[u] - 1);
    members += df * (size - 1);
  }
  return members > 0 ? Math.min(1, Math.max(0, excess / members)) : 0;
}
