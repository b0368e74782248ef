import type { ExitView, LegView } from "@/domain/junction";
import { compassPoint, type Units } from "@/ui/format";
import { COLORS } from "@/ui/scales";
import { lineLength, pathOf, placeOn, stretchOf, type PlanScale } from "./plan-geometry";

export const STREET_M = 8;
const PAVED = "#EDE6D7";

/** All streets of the junction as far as the plan shows them. */
export function Streets({ streets, scale, radiusM }: { streets: (LegView | ExitView)[]; scale: PlanScale; radiusM: number }) {
  return (
    <g fill="none" stroke={PAVED} strokeWidth={Math.max(8, STREET_M * scale.perM)}>
      {streets.map((street, i) => (
        <path key={i} d={pathOf(stretchOf(street.line, 0, Math.min(radiusM, lineLength(street.line))), scale)} />
      ))}
      <circle cx={scale.x(0)} cy={scale.y(0)} r={Math.max(6, 12 * scale.perM)} fill={PAVED} stroke="none" />
    </g>
  );
}

/** A bar across a leg, as stop lines and tails are drawn. */
export function CrossBar(props: { leg: LegView; scale: PlanScale; atM: number; halfPx: number; stroke: string; width: number; dashed?: boolean }) {
  const { at, along } = placeOn(props.leg.line, props.atM);
  const [x, y] = [props.scale.x(at[0]), props.scale.y(at[1])];
  // Across: the direction turned by a quarter, with y growing downwards on paper.
  const [dx, dy] = [along[1] * props.halfPx, along[0] * props.halfPx];
  return <line x1={x - dx} y1={y - dy} x2={x + dx} y2={y + dy} stroke={props.stroke} strokeWidth={props.width} strokeDasharray={props.dashed ? "4 3" : undefined} />;
}

/** In the upper right corner, or in the lower one where labels stand in the upper. */
export function NorthArrow({ size, isLow = false }: { size: number; isLow?: boolean }) {
  return (
    <g transform={`translate(${size - 18} ${isLow ? size - 30 : 30})`} aria-hidden="true">
      <path d="M0 -20L6 4L0 0L-6 4Z" fill={COLORS.ink} />
      <text y="20" textAnchor="middle" fontSize="14" fill={COLORS.ink}>
        {compassPoint(0).charAt(0).toUpperCase()}
      </text>
    </g>
  );
}

const METRES_PER_FOOT = 0.3048;

export function ScaleBar({ scale, units }: { scale: PlanScale; units: Units }) {
  const unit = units === "us" ? METRES_PER_FOOT : 1;
  const length = [10, 20, 50, 100, 200, 500].find((candidate) => candidate * unit * scale.perM >= 50) ?? 500;
  const width = length * unit * scale.perM;
  return (
    <g transform={`translate(8 ${scale.size - 10})`} aria-hidden="true">
      <path d={`M0 -5V0H${width}V-5`} fill="none" stroke={COLORS.ink} strokeWidth="1.4" />
      <text x={width + 8} y="1" fontSize="14" fill={COLORS.inkSoft}>
        {length} {units === "us" ? "ft" : "m"}
      </text>
    </g>
  );
}
