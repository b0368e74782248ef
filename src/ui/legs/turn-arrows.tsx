import type { LegCheckView } from "@/domain/leg-check";
import { placeOn, type PlanScale, type Point } from "@/ui/junctions/plan-geometry";
import { COLORS } from "@/ui/scales";

/** How far into the exit an arrow goes, m. */
const INTO_EXIT_M = 7;

/** Every movement as a thin arrow from its stop line to its exit; those of the selected leg stand out. */
export function TurnArrows({ view, scale, selected }: { view: LegCheckView; scale: PlanScale; selected: number | null }) {
  const inOrder = [...view.movements].sort((a, b) => Number(a.legId === selected) - Number(b.legId === selected));
  return (
    <g aria-hidden="true" pointerEvents="none">
      {inOrder.map((movement) => {
        const leg = view.legs.find((one) => one.id === movement.legId);
        const exit = view.exits.find((one) => one.id === movement.exitId);
        if (!leg || !exit) return null;
        const isSelected = leg.id === selected;
        return <Arrow key={movement.id} from={leg.line} to={exit.line} scale={scale} color={isSelected ? COLORS.pick : COLORS.inkSoft} width={isSelected ? 2 : 0.9} />;
      })}
    </g>
  );
}

function Arrow({ from, to, scale, color, width }: { from: Point[]; to: Point[]; scale: PlanScale; color: string; width: number }) {
  const stop = placeOn(from, 0);
  const out = placeOn(to, 0);
  const tip = placeOn(to, INTO_EXIT_M);
  const bend = Math.hypot(out.at[0] - stop.at[0], out.at[1] - stop.at[1]) * 0.5;
  const c1: Point = [stop.at[0] - stop.along[0] * bend, stop.at[1] - stop.along[1] * bend];
  const c2: Point = [out.at[0] - out.along[0] * bend, out.at[1] - out.along[1] * bend];
  const f = ([east, north]: Point) => `${scale.x(east).toFixed(1)} ${scale.y(north).toFixed(1)}`;
  const headingDeg = (Math.atan2(tip.along[0], tip.along[1]) * 180) / Math.PI;
  const half = 2.5 + width * 1.4;
  return (
    <>
      <path d={`M${f(stop.at)}C${f(c1)} ${f(c2)} ${f(out.at)}L${f(tip.at)}`} fill="none" stroke={color} strokeWidth={width} />
      <path d={`M${-half} 0L0 ${-half * 2}L${half} 0Z`} transform={`translate(${f(tip.at)}) rotate(${headingDeg.toFixed(1)})`} fill={color} />
    </>
  );
}
