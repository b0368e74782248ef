import type { LegOfCheck } from "@/domain/leg-check";
import { shortLegName } from "@/ui/junctions/movement-words";
import { lineLength, pathOf, placeOn, stretchOf, type PlanScale, type Point } from "@/ui/junctions/plan-geometry";
import { COLORS } from "@/ui/scales";

const STOP_HALF_M = 5;
const LABEL_ROOM_PX = 78;
const LETTER_PX = 15;

interface Props {
  leg: LegOfCheck;
  scale: PlanScale;
  isSelected: boolean;
  radiusM: number;
  /** Drawing units for a pixel of the page. */
  perPx: number;
}

/** One leg: centreline (broken where it is doubtful), stop line, storage, name. */
export function LegMark({ leg, scale, isSelected, radiusM, perPx }: Props) {
  const { line } = leg;
  const color = isSelected ? COLORS.pick : COLORS.ink;
  const path = pathOf(line, scale);
  const dash = leg.doubts.length > 0 ? "9 6" : undefined;
  return (
    <g aria-hidden="true">
      <path d={path} fill="none" stroke={COLORS.sheet} strokeWidth={isSelected ? 7 : 5} strokeOpacity="0.85" />
      <path d={path} fill="none" stroke={color} strokeWidth={isSelected ? 3.25 : 1.75} strokeDasharray={dash} />
      {leg.storageM !== null && leg.storageM <= lineLength(line) + 30 ? <Bar line={line} atM={leg.storageM} scale={scale} color={color} width={1.75} dash="4 3" /> : null}
      <Bar line={line} atM={0} scale={scale} color={color} width={isSelected ? 4.5 : 3.5} />
      <Name leg={leg} scale={scale} color={color} radiusM={radiusM} perPx={perPx} />
    </g>
  );
}

function Bar({ line, atM, scale, color, width, dash }: { line: Point[]; atM: number; scale: PlanScale; color: string; width: number; dash?: string }) {
  const { at, along } = placeOn(line, atM);
  const [x, y] = [scale.x(at[0]), scale.y(at[1])];
  const half = Math.max(9, STOP_HALF_M * scale.perM);
  return <line x1={x - along[1] * half} y1={y - along[0] * half} x2={x + along[1] * half} y2={y + along[0] * half} stroke={color} strokeWidth={width} strokeDasharray={dash} />;
}

/** Near the place where the leg leaves the plan, kept inside it. */
function Name({ leg, scale, color, radiusM, perPx }: Omit<Props, "isSelected"> & { color: string }) {
  const { line } = leg;
  const room = LABEL_ROOM_PX * perPx;
  const inside = stretchOf(line, 0, Math.min(lineLength(line), radiusM * 0.82));
  const [east, north] = inside[inside.length - 1];
  const x = Math.min(scale.size - room, Math.max(room, scale.x(east)));
  const y = Math.min(scale.size - 34, Math.max(26 * perPx, scale.y(north) - 12 * perPx));
  return (
    <text x={x} y={y} textAnchor="middle" fontSize={LETTER_PX * perPx} fontWeight="600" fill={color} stroke={COLORS.sheet} strokeWidth={4.5 * perPx} paintOrder="stroke">
      {shortLegName(leg)}
    </text>
  );
}

/** A broad stripe that takes the click; the list of legs does the same by keyboard. */
export function LegTarget({ leg, scale, onSelect }: { leg: LegOfCheck; scale: PlanScale; onSelect: () => void }) {
  return (
    <path d={pathOf(leg.line, scale)} fill="none" stroke="transparent" strokeWidth="26" className="cursor-pointer" pointerEvents="stroke" onClick={onSelect}>
      <title>{`Leg ${leg.name}`}</title>
    </path>
  );
}
