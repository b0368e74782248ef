import type { StripWindow } from "@/core/strips/strip";
import { lengthFromMetres, type Units } from "@/ui/format";

export interface Box {
  left: number;
  top: number;
  width: number;
  height: number;
}

/** Where things stand on the canvas, CSS pixels. */
export interface StripLayout {
  width: number;
  height: number;
  isNarrow: boolean;
  fontPx: number;
  plot: Box;
  delay: Box;
  /** Where the delay arises along the leg; no room for it on a narrow canvas. */
  profile: Box | null;
}

const NARROW_PX = 720;

/** Strip above, delay below on the same time axis; `tall` is the height of the strip itself. */
export function layoutStrip(width: number, tall: number): StripLayout {
  const isNarrow = width < NARROW_PX;
  const left = isNarrow ? 48 : 78;
  const right = isNarrow ? 30 : 286;
  const plot = { left, top: 14, width: Math.max(60, width - left - right), height: tall };
  const delay = { left, top: plot.top + tall + (isNarrow ? 60 : 64), width: plot.width, height: isNarrow ? 96 : 118 };
  return {
    width,
    height: delay.top + delay.height + 18,
    isNarrow,
    fontPx: isNarrow ? 12.5 : 14,
    plot,
    delay,
    profile: isNarrow ? null : { left: left + plot.width + 30, top: plot.top, width: 92, height: tall },
  };
}

/** Height of the strip that leaves room for sentence, delay and figures in the window. */
export function stripHeight(windowPx: number): number {
  return Math.round(Math.min(520, Math.max(270, windowPx - 590)));
}

export interface StripScales {
  x: (tS: number) => number;
  y: (sM: number) => number;
  tOf: (x: number) => number;
  sOf: (y: number) => number;
}

export function scalesOf(plot: Box, window: StripWindow): StripScales {
  const perS = plot.width / (window.toS - window.fromS);
  const perM = plot.height / (window.topM - window.bottomM);
  const bottom = plot.top + plot.height;
  return {
    x: (tS) => plot.left + (tS - window.fromS) * perS,
    y: (sM) => bottom - (sM - window.bottomM) * perM,
    tOf: (x) => window.fromS + (x - plot.left) / perS,
    sOf: (y) => window.bottomM + (bottom - y) / perM,
  };
}

const MINUTE_STEPS = [1, 2, 5, 10, 15, 30, 60, 120, 180, 240, 360];

/** Whole local times between the ends, as far apart as their labels need. */
export function timeTicks(window: Pick<StripWindow, "fromS" | "toS">, widthPx: number, leastPx: number): number[] {
  const most = Math.max(1, Math.floor(widthPx / leastPx));
  const spanMin = (window.toS - window.fromS) / 60;
  const step = (MINUTE_STEPS.find((minutes) => spanMin / minutes <= most) ?? 720) * 60;
  const ticks: number[] = [];
  for (let t = Math.ceil(window.fromS / step) * step; t <= window.toS + 1e-6; t += step) ticks.push(t);
  return ticks;
}

/** 1, 2 or 5 times a power of ten, so that `span` has at most `most` steps. */
export function niceStep(span: number, most: number): number {
  const least = span / Math.max(1, most);
  const power = 10 ** Math.floor(Math.log10(least));
  const factor = [1, 2, 5, 10].find((f) => f * power >= least) ?? 10;
  return factor * power;
}

export interface LengthTick {
  sM: number;
  label: string;
}

/** Whole metres or feet from the stop line up. */
export function lengthTicks(topM: number, heightPx: number, units: Units, leastPx = 36): LengthTick[] {
  const top = lengthFromMetres(topM, units);
  const step = niceStep(top, heightPx / leastPx);
  const perUnit = topM / top;
  const ticks: LengthTick[] = [];
  for (let k = 0; k * step <= top + 1e-9; k++) ticks.push({ sM: k * step * perUnit, label: String(Math.round(k * step)) });
  return ticks;
}
