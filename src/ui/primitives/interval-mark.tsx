import type { EstimateView } from "@/domain/estimate";

const WIDTH = 64;

/** Position on an axis from 0 to `max`, cut at both ends so that a long tail does not leave the drawing. */
export function axisX(value: number, max: number, width: number): number {
  if (!(max > 0)) return 0;
  return Math.min(1, Math.max(0, value / max)) * width;
}

/**
 * The 95 % interval as a thin rule and the figure as a bar across it, on an axis from 0 to `max` that all rows
 * of a table share. `describe` says the same in words for those who do not see it.
 */
export function IntervalMark({ estimate, max, describe }: { estimate: EstimateView | null; max: number; describe: (e: EstimateView) => string }) {
  if (!estimate) return <span className="text-ink-soft">–</span>;
  const [low, at, high] = [estimate.low, estimate.value, estimate.high].map((value) => 2 + axisX(value, max, WIDTH - 4));
  const runsOn = estimate.high > max;
  return (
    <span title={describe(estimate)}>
      <svg aria-hidden="true" width={WIDTH} height="14" viewBox={`0 0 ${WIDTH} 14`}>
        <line x1={low} x2={high} y1="7" y2="7" stroke="#16213A" strokeWidth="1.25" strokeDasharray={runsOn ? "3 2" : undefined} />
        <rect x={at - 2} y="2" width="4" height="10" fill="#703A28" />
      </svg>
      <span className="sr-only">{describe(estimate)}</span>
    </span>
  );
}
