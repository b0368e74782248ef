"use client";

import type { KeyboardEvent, PointerEvent } from "react";
import type { LegOfCheck } from "@/domain/leg-check";
import { formatLength } from "@/ui/format";
import { placeOn, type PlanScale } from "@/ui/junctions/plan-geometry";
import { COLORS } from "@/ui/scales";
import { useCity } from "@/ui/shell/city";
import { LEAST_SHIFT_M, MOST_SHIFT_M } from "./leg-shape";

const STEPS: Record<string, number> = { ArrowUp: 1, ArrowRight: 1, ArrowDown: -1, ArrowLeft: -1, PageUp: 5, PageDown: -5 };

interface Props {
  /** As it is drawn now, the move included. */
  leg: LegOfCheck;
  scale: PlanScale;
  /** Drawing units for a pixel of the page. */
  perPx: number;
  shiftM: number;
  onShift: (shiftM: number) => void;
  shiftOf: (event: PointerEvent) => number;
}

/** The selected leg's stop line to take hold of: dragged along the leg, or moved by the arrow keys. */
export function StopLineHandle({ leg, scale, perPx, shiftM, onShift, shiftOf }: Props) {
  const { settings, locale } = useCity();
  const { at } = placeOn(leg.line, 0);

  function onKey(event: KeyboardEvent) {
    const step = event.key === "Home" ? -shiftM : STEPS[event.key];
    if (step === undefined) return;
    event.preventDefault();
    onShift(Math.max(LEAST_SHIFT_M, Math.min(MOST_SHIFT_M, shiftM + step)));
  }

  function onPointerMove(event: PointerEvent) {
    if (event.currentTarget.hasPointerCapture(event.pointerId)) onShift(shiftOf(event));
  }

  return (
    <g
      role="slider"
      tabIndex={0}
      aria-label={`Stop line of the leg ${leg.name}`}
      aria-valuemin={LEAST_SHIFT_M}
      aria-valuemax={MOST_SHIFT_M}
      aria-valuenow={shiftM}
      aria-valuetext={shiftWords(shiftM, (m) => formatLength(m, settings.units, locale))}
      className="cursor-grab touch-none active:cursor-grabbing"
      onKeyDown={onKey}
      onPointerDown={(event) => event.currentTarget.setPointerCapture(event.pointerId)}
      onPointerMove={onPointerMove}
      data-testid="stop-line"
    >
      <circle cx={scale.x(at[0])} cy={scale.y(at[1])} r={16 * perPx} fill="transparent" />
      <circle cx={scale.x(at[0])} cy={scale.y(at[1])} r={6.5 * perPx} fill={COLORS.sheet} stroke={COLORS.pick} strokeWidth={2.5 * perPx} />
    </g>
  );
}

/** "where it is", "8 m upstream", "3 m towards the junction". */
export function shiftWords(shiftM: number, length: (m: number) => string): string {
  if (shiftM === 0) return "where it is";
  return shiftM > 0 ? `${length(shiftM)} upstream` : `${length(-shiftM)} towards the junction`;
}
