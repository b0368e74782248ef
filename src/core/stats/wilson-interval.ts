/** 97.5 % point of the standard normal distribution. */
export const Z_975 = 1.959963984540054;

/**
 * Wilson score interval (1927) of a proportion, 95 % unless told otherwise.
 * `n` may be an effective number and need not be whole; NaN ends when it is not positive.
 */
export function wilsonInterval(share: number, n: number, z = Z_975): { low: number; high: number } {
  if (!(n > 0) || Number.isNaN(share)) return { low: NaN, high: NaN };
  const z2 = z * z;
  const centre = (share + z2 / (2 * n)) / (1 + z2 / n);
  const half = (z * Math.sqrt((share * (1 - share)) / n + z2 / (4 * n * n))) / (1 + z2 / n);
  return { low: Math.max(0, centre - half), high: Math.min(1, centre + half) };
}
