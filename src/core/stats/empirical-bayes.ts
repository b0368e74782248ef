export interface ShrunkMeans {
  /** Mean of the group, weighted by total variance. */
  mean: number;
  /** Variance between the units. */
  between: number;
  /** Shrunk mean and its standard deviation for each unit. */
  value: Float64Array;
  sd: Float64Array;
}

/**
 * Normal-normal empirical Bayes with the between-unit variance of DerSimonian and Laird (Controlled Clinical
 * Trials 7, 1986). `y` are the unit means, `v` their sampling variances (> 0). With one unit nothing is shrunk.
 * O(units).
 */
export function shrinkMeans(y: ArrayLike<number>, v: ArrayLike<number>): ShrunkMeans {
  const k = y.length;
  let w = 0;
  let wy = 0;
  let w2 = 0;
  for (let i = 0; i < k; i++) {
    if (!(v[i] > 0)) throw new RangeError(`Sampling variance must be positive, got ${v[i]}.`);
    w += 1 / v[i];
    wy += y[i] / v[i];
    w2 += 1 / (v[i] * v[i]);
  }
  let q = 0;
  for (let i = 0; i < k; i++) q += (y[i] - wy / w) ** 2 / v[i];
  const between = k > 1 ? Math.max(0, (q - (k - 1)) / (w - w2 / w)) : Infinity;
  return shrinkWith(y, v, between);
}

function shrinkWith(y: ArrayLike<number>, v: ArrayLike<number>, between: number): ShrunkMeans {
  const k = y.length;
  const value = new Float64Array(k);
  const sd = new Float64Array(k);
  if (between === Infinity || k === 0) {
    for (let i = 0; i < k; i++) {
      value[i] = y[i];
      sd[i] = Math.sqrt(v[i]);
    }
    return { mean: k === 0 ? NaN : y[0], between, value, sd };
  }
  let weights = 0;
  let sum = 0;
  for (let i = 0; i < k; i++) {
    weights += 1 / (v[i] + between);
    sum += y[i] / (v[i] + between);
  }
  const mean = sum / weights;
  for (let i = 0; i < k; i++) {
    const b = v[i] / (v[i] + between);
    value[i] = b * mean + (1 - b) * y[i];
    sd[i] = Math.sqrt((1 - b) * v[i]);
  }
  return { mean, between, value, sd };
}
