import type { ExitView, JunctionView, LegView, MovementView } from "@/domain/junction";
import { placeOn, type PlanScale, type Point } from "./plan-geometry";

/** A movement as it is drawn: a band from the leg to the exit. */
export interface Flow {
  movement: MovementView;
  path: string;
  widthPx: number;
  /** Tip of the arrow and its direction in degrees clockwise from up. */
  tip: Point;
  headingDeg: number;
}

const WIDEST_PX = 15;
const NARROWEST_PX = 1.4;
/** Bands begin and end this far from the junction's point, metres. */
export const FLOW_RADIUS_M = 48;

/**
 * Bands of all movements, as wide as the vehicles they carry. On a leg they lie side by side in the order of
 * their turns, on an exit in the order of the legs that they come from, so that they cross as little as they must.
 */
export function flowsOf(view: Pick<JunctionView, "legs" | "exits" | "movements">, scale: PlanScale): Flow[] {
  const most = Math.max(1, ...view.movements.map((movement) => movement.vehicles));
  const width = (movement: MovementView) => Math.max(NARROWEST_PX, (WIDEST_PX * movement.vehicles) / most);
  const seen = view.movements.filter((movement) => movement.vehicles > 0);
  const onLeg = sideBySide(seen, (m) => m.legId, (m) => m.turnDeg, width);
  const onExit = sideBySide(seen, (m) => m.exitId, (m) => -m.turnDeg, width);
  const legs = new Map(view.legs.map((leg) => [leg.id, leg]));
  const exits = new Map(view.exits.map((exit) => [exit.id, exit]));
  return seen.flatMap((movement) => {
    const leg = legs.get(movement.legId);
    const exit = exits.get(movement.exitId);
    if (!leg || !exit) return [];
    return [flowOf(movement, leg, exit, onLeg.get(movement.id) ?? 0, onExit.get(movement.id) ?? 0, width(movement), scale)];
  });
}

/** Offset to the right of each band's middle from its street's, pixels. */
function sideBySide(
  movements: MovementView[],
  group: (m: MovementView) => number,
  order: (m: MovementView) => number,
  width: (m: MovementView) => number,
): Map<number, number> {
  const offsets = new Map<number, number>();
  for (const key of new Set(movements.map(group))) {
    const members = movements.filter((m) => group(m) === key).sort((a, b) => order(a) - order(b));
    const gap = 1.5;
    const total = members.reduce((sum, m) => sum + width(m) + gap, -gap);
    let at = -total / 2;
    for (const member of members) {
      offsets.set(member.id, at + width(member) / 2);
      at += width(member) + gap;
    }
  }
  return offsets;
}

function flowOf(movement: MovementView, leg: LegView, exit: ExitView, legPx: number, exitPx: number, widthPx: number, scale: PlanScale): Flow {
  const stop = placeOn(leg.line, 0);
  const leave = placeOn(exit.line, 0);
  const begin = placeOn(leg.line, Math.max(8, FLOW_RADIUS_M - Math.hypot(...stop.at)));
  const end = placeOn(exit.line, Math.max(8, FLOW_RADIUS_M - Math.hypot(...leave.at)));
  // A leg's line runs upstream: vehicles go against it.
  const inward: Point = [-stop.along[0], -stop.along[1]];
  const p0 = aside(begin.at, [-begin.along[0], -begin.along[1]], legPx, scale);
  const p1 = aside(stop.at, inward, legPx, scale);
  const p2 = aside(leave.at, leave.along, exitPx, scale);
  const p3 = aside(end.at, end.along, exitPx, scale);
  const bend = Math.hypot(p2[0] - p1[0], p2[1] - p1[1]) * 0.5;
  const out: Point = [leave.along[0], -leave.along[1]];
  const c1: Point = [p1[0] + inward[0] * bend, p1[1] - inward[1] * bend];
  const c2: Point = [p2[0] - out[0] * bend, p2[1] - out[1] * bend];
  const f = (point: Point) => `${point[0].toFixed(1)} ${point[1].toFixed(1)}`;
  return {
    movement,
    path: `M${f(p0)}L${f(p1)}C${f(c1)} ${f(c2)} ${f(p2)}L${f(p3)}`,
    widthPx,
    tip: p3,
    headingDeg: (Math.atan2(end.along[0], end.along[1]) * 180) / Math.PI,
  };
}

/** A place in drawing units, moved to the right of a direction of travel. */
function aside([x, y]: Point, [east, north]: Point, px: number, scale: PlanScale): Point {
  return [scale.x(x) + north * px, scale.y(y) + east * px];
}
