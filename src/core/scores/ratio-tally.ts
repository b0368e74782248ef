/**
 * Sums for ratios total / base of many units (seconds of delay by vehicles, seconds spilled by seconds seen), together
 * with what their variance under clustering needs. Fed in order of day, then quarter: `addToTally` any number of times,
 * `closeQuarter` after each quarter, `closeDay` after each day.
 */
export interface RatioTally {
  base: Float64Array;
  total: Float64Array;
  /** Clusters with any base. */
  days: Uint32Array;
  quarters: Uint32Array;
  /** Sums over days of total², total × base, base². */
  dayTT: Float64Array;
  dayTB: Float64Array;
  dayBB: Float64Array;
  /** The same of the differences between neighbouring quarters of one day, and how many there are. */
  stepTT: Float64Array;
  stepTB: Float64Array;
  stepBB: Float64Array;
  steps: Uint32Array;
  quarterBB: Float64Array;
  open: { day: OpenClusters; quarter: OpenClusters; lastBase: Float64Array; lastTotal: Float64Array };
}

interface OpenClusters {
  touched: number[];
  base: Float64Array;
  total: Float64Array;
}

export function createTally(units: number): RatioTally {
  const zeros = (): Float64Array => new Float64Array(units);
  return {
    base: zeros(),
    total: zeros(),
    days: new Uint32Array(units),
    quarters: new Uint32Array(units),
    dayTT: zeros(),
    dayTB: zeros(),
    dayBB: zeros(),
    stepTT: zeros(),
    stepTB: zeros(),
    stepBB: zeros(),
    steps: new Uint32Array(units),
    quarterBB: zeros(),
    open: {
      day: { touched: [], base: zeros(), total: zeros() },
      quarter: { touched: [], base: zeros(), total: zeros() },
      lastBase: zeros(),
      lastTotal: zeros(),
    },
  };
}

/** Base must be positive. */
export function addToTally(tally: RatioTally, unit: number, base: number, total: number): void {
  addToCluster(tally.open.quarter, unit, base, total);
}

function addToCluster(cluster: OpenClusters, unit: number, base: number, total: number): void {
  if (cluster.base[unit] === 0) cluster.touched.push(unit);
  cluster.base[unit] += base;
  cluster.total[unit] += total;
}

export function closeQuarter(tally: RatioTally): void {
  const { quarter, day, lastBase, lastTotal } = tally.open;
  for (const u of quarter.touched) {
    const b = quarter.base[u];
    const t = quarter.total[u];
    if (lastBase[u] > 0) {
      const stepB = b - lastBase[u];
      const stepT = t - lastTotal[u];
      tally.stepTT[u] += stepT * stepT;
      tally.stepTB[u] += stepT * stepB;
      tally.stepBB[u] += stepB * stepB;
      tally.steps[u] += 1;
    }
    lastBase[u] = b;
    lastTotal[u] = t;
    tally.quarters[u] += 1;
    tally.quarterBB[u] += b * b;
    addToCluster(day, u, b, t);
  }
  clear(quarter);
}

/** Also closes the quarter that is open. */
export function closeDay(tally: RatioTally): void {
  closeQuarter(tally);
  const { day, lastBase } = tally.open;
  for (const u of day.touched) {
    const b = day.base[u];
    const t = day.total[u];
    tally.base[u] += b;
    tally.total[u] += t;
    tally.days[u] += 1;
    tally.dayTT[u] += t * t;
    tally.dayTB[u] += t * b;
    tally.dayBB[u] += b * b;
    lastBase[u] = 0;
  }
  clear(day);
}

function clear(cluster: OpenClusters): void {
  for (const u of cluster.touched) {
    cluster.base[u] = 0;
    cluster.total[u] = 0;
  }
  cluster.touched.length = 0;
}
