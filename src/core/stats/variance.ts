import { mean } from "./mean";

/** Sample variance (divisor n - 1), two passes; NaN for fewer than two values. O(n). */
export function variance(values: ArrayLike<number>): number {
  if (values.length < 2) return NaN;
  const centre = mean(values);
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += (values[i] - centre) ** 2;
  return sum / (values.length - 1);
}
