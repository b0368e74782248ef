import { axisX } from "./interval-mark";

const WIDTH = 48;

/** The span of ranks that the sample allows, with the rank as a dot; first place at the left, the last at the right. */
export function RankSpan(props: { rank: number | null; low: number | null; high: number | null; last: number }) {
  const { rank, low, high, last } = props;
  if (rank === null || low === null || high === null) return <span className="text-ink-soft">–</span>;
  // Square roots give the first places room: they are the ones people argue about.
  const x = (value: number) => 3 + axisX(Math.sqrt(value - 1), Math.sqrt(Math.max(1, last - 1)), WIDTH - 6);
  const words = `rank ${rank}, 95 % interval ${low} to ${high}`;
  return (
    <span title={words}>
      <svg aria-hidden="true" width={WIDTH} height="12" viewBox={`0 0 ${WIDTH} 12`}>
        <line x1={x(low)} x2={x(high)} y1="6" y2="6" stroke="#16213A" strokeWidth="1.25" />
        <circle cx={x(rank)} cy="6" r="2.6" fill="#16213A" />
      </svg>
      <span className="sr-only">{words}</span>
    </span>
  );
}
