/** Spearman's rank correlation with mean ranks for ties; NaN below three pairs. */
export function rankCorrelation(a: number[], b: number[]): number {
  if (a.length < 3) return Number.NaN;
  return correlation(meanRanks(a), meanRanks(b));
}

function meanRanks(values: number[]): number[] {
  const order = values.map((_, i) => i).sort((i, j) => values[i] - values[j]);
  const ranks = new Array<number>(values.length);
  for (let from = 0; from < order.length; ) {
    let to = from;
    while (to + 1 < order.length && values[order[to + 1]] === values[order[from]]) to++;
    for (let k = from; k <= to; k++) ranks[order[k]] = (from + to) / 2;
    from = to + 1;
  }
  return ranks;
}

function correlation(a: number[], b: number[]): number {
  const mean = (values: number[]) => values.reduce((sum, v) => sum + v, 0) / values.length;
  const ma = mean(a);
  const mb = mean(b);
  let ab = 0;
  let aa = 0;
  let bb = 0;
  for (let i = 0; i < a.length; i++) {
    ab += (a[i] - ma) * (b[i] - mb);
    aa += (a[i] - ma) ** 2;
    bb += (b[i] - mb) ** 2;
  }
  return ab / Math.sqrt(aa * bb);
}
