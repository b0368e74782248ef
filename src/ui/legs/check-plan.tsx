"use client";

import { useEffect, useRef, type PointerEvent } from "react";
import type { LegCheckView, PingCloud } from "@/domain/leg-check";
import { planScale, type PlanScale, type Point } from "@/ui/junctions/plan-geometry";
import { NorthArrow, ScaleBar } from "@/ui/junctions/plan-parts";
import { useCity } from "@/ui/shell/city";
import { paintCanvas } from "@/ui/strips/paint-canvas";
import type { CloudStyle } from "./cloud-colors";
import { drawCloud } from "./draw-cloud";
import { LegMark, LegTarget } from "./leg-mark";
import { shiftAt } from "./leg-shape";
import { StopLineHandle } from "./stop-line-handle";
import { TurnArrows } from "./turn-arrows";
import { useBoxSize, type BoxSize } from "./use-box-size";

const SIZE = 640;
const MARGIN = 4;
const DRAWN_COLORS = ["#0B6E69", "#8E3A7D"];

export interface CheckPlanProps {
  view: LegCheckView;
  cloud: PingCloud | undefined;
  style: CloudStyle;
  radiusM: number;
  selected: number | null;
  /** The selected leg's line while its stop line is being moved. */
  preview: Point[] | null;
  shiftM: number;
  mayEdit: boolean;
  /** Lines being drawn; null outside drawing. */
  lines: Point[][] | null;
  active: number;
  onSelect: (legId: number) => void;
  onShift: (shiftM: number) => void;
  onPoint: (point: Point) => void;
}

/** The junction to scale: pings below, legs with stop line, storage and turns above, lines being drawn on top. */
export function CheckPlan(props: CheckPlanProps) {
  const { cloud, style, radiusM, selected, preview, lines, mayEdit } = props;
  const { settings } = useCity();
  const box = useRef<HTMLDivElement>(null);
  const drawing = useRef<SVGSVGElement>(null);
  const size = useBoxSize(box);
  const scale = planScale(radiusM, SIZE, MARGIN);
  // Words stay as large on a small screen: the drawing is scaled, they are not.
  const perPx = size.width > 0 ? SIZE / Math.min(size.width, size.height) : 1;
  const view = preview ? withLine(props.view, selected, preview) : props.view;
  const leg = view.legs.find((candidate) => candidate.id === selected);
  const known = props.view.legs.find((candidate) => candidate.id === selected);
  const inOrder = [...view.legs].sort((a, b) => Number(a.id === selected) - Number(b.id === selected));

  function placeOf(event: { clientX: number; clientY: number }): Point {
    const frame = (drawing.current as SVGSVGElement).getBoundingClientRect();
    const metres = SIZE / Math.min(frame.width, frame.height) / scale.perM;
    return [(event.clientX - frame.left - frame.width / 2) * metres, (frame.top + frame.height / 2 - event.clientY) * metres];
  }

  function onPointerDown(event: PointerEvent) {
    if (lines && event.button === 0) props.onPoint(placeOf(event));
  }

  return (
    <div ref={box} className="relative aspect-square w-full min-w-0 overflow-hidden border border-rule bg-sheet lg:aspect-auto lg:h-[calc(100dvh-17rem)] lg:min-h-[28rem]">
      <CloudCanvas size={size} cloud={cloud} style={style} radiusM={radiusM} />
      <svg
        ref={drawing}
        viewBox={`0 0 ${SIZE} ${SIZE}`}
        role="group"
        aria-label={`Plan of the legs of ${view.junction.name}, north up, to scale`}
        className={`absolute inset-0 size-full font-table ${lines ? "cursor-crosshair touch-none" : ""}`}
        onPointerDown={onPointerDown}
        data-testid="leg-plan"
      >
        <circle cx={scale.x(0)} cy={scale.y(0)} r="3.5" fill="#FFFDF8" stroke="#16213A" strokeWidth="1.5" />
        {inOrder.map((one) => (
          <LegMark key={one.id} leg={one} scale={scale} isSelected={one.id === selected} radiusM={radiusM} perPx={perPx} />
        ))}
        <TurnArrows view={view} scale={scale} selected={selected} />
        {lines ? null : inOrder.map((one) => <LegTarget key={one.id} leg={one} scale={scale} onSelect={() => props.onSelect(one.id)} />)}
        {leg && known && mayEdit && !lines ? (
          <StopLineHandle leg={leg} scale={scale} perPx={perPx} shiftM={props.shiftM} onShift={props.onShift} shiftOf={(event) => shiftAt(known.line, placeOf(event))} />
        ) : null}
        {lines?.map((line, i) => <DrawnLine key={i} line={line} scale={scale} color={DRAWN_COLORS[i]} isActive={i === props.active} />)}
        <g transform={`scale(${perPx.toFixed(3)})`}>
          <NorthArrow size={SIZE / perPx} />
          <ScaleBar scale={{ ...scale, size: SIZE / perPx, perM: scale.perM / perPx }} units={settings.units} />
        </g>
      </svg>
    </div>
  );
}

function withLine(view: LegCheckView, legId: number | null, line: Point[]): LegCheckView {
  return { ...view, legs: view.legs.map((leg) => (leg.id === legId ? { ...leg, line } : leg)) };
}

function CloudCanvas({ size, cloud, style, radiusM }: { size: BoxSize; cloud: PingCloud | undefined; style: CloudStyle; radiusM: number }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const { width, height, ratio } = size;
  useEffect(() => {
    if (width === 0) return;
    const side = Math.min(width, height);
    const frame = requestAnimationFrame(() =>
      paintCanvas(canvas.current, width, height, ratio, (ctx) => {
        ctx.translate((width - side) / 2, (height - side) / 2);
        if (cloud) drawCloud(ctx, cloud, planScale(radiusM, side, (MARGIN * side) / SIZE), style);
      }),
    );
    return () => cancelAnimationFrame(frame);
  }, [cloud, style, radiusM, width, height, ratio]);
  return <canvas ref={canvas} aria-hidden="true" className="absolute inset-0 size-full" />;
}

function DrawnLine({ line, scale, color, isActive }: { line: Point[]; scale: PlanScale; color: string; isActive: boolean }) {
  const points = line.map(([east, north]) => `${scale.x(east).toFixed(1)},${scale.y(north).toFixed(1)}`).join(" ");
  return (
    <g pointerEvents="none">
      <polyline points={points} fill="none" stroke="#FFFDF8" strokeWidth="6" />
      <polyline points={points} fill="none" stroke={color} strokeWidth="3" strokeDasharray={isActive ? undefined : "6 4"} />
      {line.map(([east, north], i) => (
        <circle key={i} cx={scale.x(east)} cy={scale.y(north)} r={i === 0 ? 6 : 4} fill={i === 0 ? color : "#FFFDF8"} stroke={color} strokeWidth="2" />
      ))}
    </g>
  );
}
