"use client";

import { useEffect, useRef, type PointerEvent } from "react";
import type { LegCheckView, PingCloud } from "@/domain/leg-check";
import { planScale, type PlanScale, type Point } from "@/ui/junctions/plan-geometry";
import { NorthArrow, ScaleBar } from "@/ui/junctions/plan-parts";
import { useCity } from "@/ui/shell/city";
import { paintCanvas } from "@/ui/strips/paint-canvas";
import { useBoxWidth } from "@/ui/strips/use-box-width";
import type { CloudStyle } from "./cloud-colors";
import { drawCloud } from "./draw-cloud";
import { LegMark, LegTarget } from "./leg-mark";
import { shiftAt } from "./leg-shape";
import { StopLineHandle } from "./stop-line-handle";
import { TurnArrows } from "./turn-arrows";

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
  const { view, cloud, style, radiusM, selected, preview, lines, mayEdit } = props;
  const { settings } = useCity();
  const box = useRef<HTMLDivElement>(null);
  const drawing = useRef<SVGSVGElement>(null);
  const scale = planScale(radiusM, SIZE, MARGIN);
  const leg = view.legs.find((candidate) => candidate.id === selected) ?? null;
  const inOrder = [...view.legs].sort((a, b) => Number(a.id === selected) - Number(b.id === selected));

  function placeOf(event: { clientX: number; clientY: number }): Point {
    const frame = (drawing.current as SVGSVGElement).getBoundingClientRect();
    const perPx = SIZE / frame.width / scale.perM;
    return [(event.clientX - frame.left - frame.width / 2) * perPx, (frame.top + frame.height / 2 - event.clientY) * perPx];
  }

  function onPointerDown(event: PointerEvent) {
    if (lines && event.button === 0) props.onPoint(placeOf(event));
  }

  return (
    <div ref={box} className="relative aspect-square w-full max-w-[min(100%,calc(100dvh-11rem))] min-w-0 border border-rule bg-sheet max-lg:max-w-full">
      <CloudCanvas box={box} cloud={cloud} style={style} radiusM={radiusM} />
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
          <LegMark key={one.id} leg={one} line={one.id === selected && preview ? preview : one.line} scale={scale} isSelected={one.id === selected} radiusM={radiusM} />
        ))}
        <TurnArrows view={view} scale={scale} selected={selected} />
        {lines ? null : inOrder.map((one) => <LegTarget key={one.id} leg={one} scale={scale} onSelect={() => props.onSelect(one.id)} />)}
        {leg && mayEdit && !lines ? (
          <StopLineHandle leg={leg} line={preview ?? leg.line} scale={scale} shiftM={props.shiftM} onShift={props.onShift} shiftOf={(event) => shiftAt(leg.line, placeOf(event))} />
        ) : null}
        {lines?.map((line, i) => <DrawnLine key={i} line={line} scale={scale} color={DRAWN_COLORS[i]} isActive={i === props.active} />)}
        <NorthArrow size={SIZE} />
        <ScaleBar scale={scale} units={settings.units} />
      </svg>
    </div>
  );
}

function CloudCanvas({ box, cloud, style, radiusM }: { box: React.RefObject<HTMLDivElement | null>; cloud: PingCloud | undefined; style: CloudStyle; radiusM: number }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const { width, ratio } = useBoxWidth(box);
  useEffect(() => {
    if (width === 0) return;
    const frame = requestAnimationFrame(() =>
      paintCanvas(canvas.current, width, width, ratio, (ctx) => {
        if (cloud) drawCloud(ctx, cloud, planScale(radiusM, width, (MARGIN * width) / SIZE), style);
      }),
    );
    return () => cancelAnimationFrame(frame);
  }, [cloud, style, radiusM, width, ratio]);
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
