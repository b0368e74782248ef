/** What hangs together: the members of one day, or, where days are too few to tell, of one quarter of an hour. */
export type Clusters = "days" | "quarters";

/** Fewer days than this cannot speak for the spread between days; neighbouring quarters are compared instead. */
export const LEAST_DAYS_FOR_DAY_CLUSTERS = 3;

export function clustersFor(days: number): Clusters {
  return days >= LEAST_DAYS_FOR_DAY_CLUSTERS ? "days" : "quarters";
}

/**
 * Sums for ratios total / base of many units (seconds of delay by vehicles, seconds spilled by seconds seen), together
 * with what their variance under clustering needs. Fed in order of day, then quarter: `addToTally` any number of times,
 * `closeQuarterOf` each unit after each quarter, `closeDay` after each day.
 */
export interface RatioTally {
  clusters: Clusters;
  base: Float64Array;
  total: Float64Array;
  /** Days, and clusters, with any base. */
  days: Uint32Array;
  count: Uint32Array;
  /** Sum over clusters of base². */
  baseSq: Float64Array;
  /**
   * Sums of squares and products of (total, base): of the days themselves, or of the differences between neighbouring
   * quarters of one day, of which there are `steps`.
   */
  tt: Float64Array;
  tb: Float64Array;
  bb: Float64Array;
  steps: Uint32Array;
  /** The cluster that is being filled, the one before it on the same day, and whether the day has any base yet. */
  open: { base: Float64Array; total: Float64Array; lastBase: Float64Array; lastTotal: Float64Array; isSeen: Uint8Array };
}

export function createTally(units: number, clusters: Clusters): RatioTally {
  const zeros = (): Float64Array => new Float64Array(units);
  return {
    clusters,
    base: zeros(),
    total: zeros(),
    days: new Uint32Array(units),
    count: new Uint32Array(units),
    baseSq: zeros(),
    tt: zeros(),
    tb: zeros(),
    bb: zeros(),
    steps: new Uint32Array(units),
    open: { base: zeros(), total: zeros(), lastBase: zeros(), lastTotal: zeros(), isSeen: new Uint8Array(units) },
  };
}

/** Base must be positive. */
export function addToTally(tally: RatioTally, unit: number, base: number, total: number): void {
  tally.open.base[unit] += base;
  tally.open.total[unit] += total;
}

/**
 * One whole day of a unit whose clusters are days: as adding and closing the day, but for what `finishDays` derives at
 * the end. Base must be positive.
 */
export function addDayOf(tally: RatioTally, unit: number, base: number, total: number): void {
  tally.base[unit] += base;
  tally.total[unit] += total;
  tally.count[unit] += 1;
  addSquares(tally, unit, total, base);
}

/** After the last `addDayOf`. O(units). */
export function finishDays(tally: RatioTally): void {
  tally.days.set(tally.count);
  tally.baseSq.set(tally.bb);
}

/** Also closes the quarter that is open. O(units). */
export function closeDay(tally: RatioTally): void {
  for (let u = 0; u < tally.base.length; u++) closeDayOf(tally, u);
}

/** Nothing to do where days are the clusters. */
export function closeQuarterOf(tally: RatioTally, unit: number): void {
  if (tally.clusters === "quarters") closeCluster(tally, unit);
}

export function closeDayOf(tally: RatioTally, unit: number): void {
  closeCluster(tally, unit);
  tally.days[unit] += tally.open.isSeen[unit];
  tally.open.lastBase[unit] = 0;
  tally.open.isSeen[unit] = 0;
}

function closeCluster(tally: RatioTally, u: number): void {
  const { open } = tally;
  const b = open.base[u];
  if (!(b > 0)) return;
  const t = open.total[u];
  tally.base[u] += b;
  tally.total[u] += t;
  tally.baseSq[u] += b * b;
  tally.count[u] += 1;
  open.isSeen[u] = 1;
  if (tally.clusters === "days") addSquares(tally, u, t, b);
  else {
    if (open.lastBase[u] > 0) {
      addSquares(tally, u, t - open.lastTotal[u], b - open.lastBase[u]);
      tally.steps[u] += 1;
    }
    open.lastBase[u] = b;
    open.lastTotal[u] = t;
  }
  open.base[u] = 0;
  open.total[u] = 0;
}

function addSquares(tally: RatioTally, u: number, t: number, b: number): void {
  tally.tt[u] += t * t;
  tally.tb[u] += t * b;
  tally.bb[u] += b * b;
}
