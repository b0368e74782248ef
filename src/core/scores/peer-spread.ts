import type { RatioTally } from "./ratio-tally";

/** Weight of the peers' spread, in degrees of freedom: a few lucky equal delays must not look exact. */
export const PEER_SPREAD_DF = 4;
/** Weight of the peers' mean, in traversals, in the level that a unit's spread is expected at; and the least level. */
const PEER_MEAN_WEIGHT = 8;
const LEAST_LEVEL_S = 5;
/** Coefficient of variation of delay where few peers tell their own: 0.8 to 1.2 under random arrivals on red. */
const PUBLISHED_CV = 1;
const PUBLISHED_DF = 10;

/**
 * Variance of single delays that peers let expect for each unit; 0 where it was not seen. Delay scatters about in
 * proportion to its mean (coefficient of variation near 1, as uniform waits at red have it), so that peers lend their
 * ratio of variance to mean squared, and the mean of a unit with few traversals leans on the group's. O(units).
 */
export function peerSpread(tally: RatioTally, sumSq: Float64Array, group: ArrayLike<number>): Float64Array {
  const pools = new Map<number, Pool>();
  const everyone: Pool = { n: 0, total: 0, squares: 0, df: 0, weight: 0 };
  const poolOf = (u: number): Pool => pools.get(group[u]) ?? everyone;
  eachSeen(tally, (u, n) => {
    if (!pools.has(group[u])) pools.set(group[u], { n: 0, total: 0, squares: 0, df: 0, weight: 0 });
    for (const pool of [poolOf(u), everyone]) {
      pool.n += n;
      pool.total += tally.total[u];
    }
  });
  const level = (u: number, pool: Pool): number =>
    Math.max(LEAST_LEVEL_S, (tally.total[u] + PEER_MEAN_WEIGHT * (pool.total / pool.n)) / (tally.base[u] + PEER_MEAN_WEIGHT));
  eachSeen(tally, (u, n) => {
    for (const pool of [poolOf(u), everyone]) {
      pool.squares += squaresWithin(tally, sumSq, u);
      pool.df += n - 1;
      pool.weight += (n - 1) * level(u, pool) ** 2;
    }
  });
  const spread = new Float64Array(tally.base.length);
  eachSeen(tally, (u) => {
    const pool = poolOf(u).df >= PEER_SPREAD_DF ? poolOf(u) : everyone;
    const published = PUBLISHED_DF * Math.max(LEAST_LEVEL_S, pool.total / pool.n) ** 2;
    spread[u] = ((pool.squares + PUBLISHED_CV ** 2 * published) / (pool.weight + published)) * level(u, pool) ** 2;
  });
  return spread;
}

interface Pool {
  n: number;
  total: number;
  squares: number;
  df: number;
  weight: number;
}

function eachSeen(tally: RatioTally, visit: (unit: number, n: number) => void): void {
  for (let u = 0; u < tally.base.length; u++) if (tally.base[u] > 0) visit(u, tally.base[u]);
}

/** Sum of squared deviations of a unit's delays from their mean. */
export function squaresWithin(tally: RatioTally, sumSq: Float64Array, u: number): number {
  return Math.max(0, sumSq[u] - tally.total[u] ** 2 / tally.base[u]);
}
