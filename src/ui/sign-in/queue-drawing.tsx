import { drawQueue } from "./queue-paths";

const LENGTH_M = 150;
const CYCLES = 4;
const WIDTH = 640;
const HEIGHT = 420;
const FOOT = 18;

const queue = drawQueue(CYCLES, LENGTH_M);
const x = (tS: number) => ((tS / (CYCLES * 60)) * WIDTH).toFixed(1);
const y = (sM: number) => (HEIGHT - FOOT - (sM / LENGTH_M) * (HEIGHT - FOOT)).toFixed(1);
const line = (points: { tS: number; sM: number }[]) => `M${points.map((p) => `${x(p.tS)} ${y(p.sM)}`).join("L")}`;

/** What the product is about, drawn: vehicles that come down to a stop line, and the tail of the queue they make. */
export function QueueDrawing() {
  return (
    <svg aria-hidden="true" viewBox={`0 0 ${WIDTH} ${HEIGHT}`} preserveAspectRatio="xMinYMax slice" className="block h-full w-full" fill="none">
      <g stroke="#16213A" strokeOpacity="0.55" strokeWidth="1.1" strokeLinejoin="round">
        {queue.paths.map((path, at) => (
          <path key={at} d={line(path)} />
        ))}
      </g>
      <g stroke="#C43E1C" strokeWidth="2.6" strokeLinejoin="round" strokeLinecap="round">
        {queue.tail.map((stands, at) => (
          <path key={at} d={line(stands)} />
        ))}
      </g>
      <path d={`M0 ${y(0)}H${WIDTH}`} stroke="#16213A" strokeWidth="2" />
      <g stroke="#16213A" strokeWidth="7">
        {queue.red.map((red, at) => (
          <path key={at} d={`M${x(red.fromS)} ${Number(y(0)) + 4}H${x(red.toS)}`} />
        ))}
      </g>
    </svg>
  );
}
