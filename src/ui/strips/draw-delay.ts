import { SIGNALISED_LOS } from "@/core/stats/level-of-service";
import type { DelayOverTime } from "@/core/strips/delay-over-time";
import { COLORS } from "@/ui/scales";
import { clipTo } from "./draw-cells";
import { drawUpright, FONT, type StripWords } from "./draw-lines";
import { niceStep, type Box, type StripLayout, type StripScales } from "./strip-layout";
import type { StripPicture } from "./strip-picture";

const BAND = "#E9DFCB";

/** Top of the delay axis: room for the whole band where it is not absurdly wide, and never below the bound of C. */
export function delayTop(meanS: ArrayLike<number>, highS: ArrayLike<number>): number {
  const means = Array.from(meanS).filter(Number.isFinite);
  const highs = Array.from(highS).filter(Number.isFinite);
  const largest = Math.max(0, ...means);
  return Math.max(40, Math.min(Math.max(0, ...highs), largest * 1.6) * 1.06);
}

export interface LosBand {
  letter: string;
  fromS: number;
  toS: number;
}

/** Levels of service that the axis shows, from the lowest. */
export function losBands(topS: number): LosBand[] {
  return SIGNALISED_LOS.map(({ letter, upToS }, i) => ({ letter, fromS: i === 0 ? 0 : SIGNALISED_LOS[i - 1].upToS, toS: Math.min(topS, upToS) })).filter(
    (band) => band.fromS < topS,
  );
}

/** Where F begins. */
const LAST_BOUND_S = Math.max(...SIGNALISED_LOS.map(({ upToS }) => upToS).filter(Number.isFinite));

/** Values that the axis names, from 0 up: bounds of the levels of service, and whole steps above the last; those too near to the one below are left out. */
export function delayTicks(topS: number, heightPx: number, leastPx: number): number[] {
  const bounds = losBands(topS).map((band) => band.fromS);
  const step = niceStep(topS, heightPx / (2 * leastPx));
  const steps = Array.from({ length: Math.floor(topS / step) }, (_, k) => (k + 1) * step).filter((value) => value > LAST_BOUND_S);
  const kept: number[] = [];
  for (const value of [...bounds, ...steps]) if (kept.length === 0 || ((value - kept[kept.length - 1]) * heightPx) / topS >= leastPx) kept.push(value);
  return kept;
}

/** Mean delay as a line with its 95 % band, on the strip's time axis; letters stand between their bounds. */
export function drawDelay(ctx: CanvasRenderingContext2D, layout: StripLayout, scales: StripScales, { delay }: StripPicture, words: StripWords): void {
  const { delay: box } = layout;
  const topS = delayTop(delay.meanS, delay.highS);
  const y = (seconds: number) => box.top + box.height * (1 - Math.max(0, seconds) / topS);
  ctx.save();
  drawBounds(ctx, layout, box, topS, y);
  clipTo(ctx, { left: box.left, top: box.top - 2, width: box.width, height: box.height + 4 });
  for (const run of runsOf(delay)) drawRun(ctx, run, scales, y);
  ctx.restore();
  drawUpright(ctx, layout, words.delayAxis, box.top + box.height / 2);
}

interface DelayPoint {
  tS: number;
  meanS: number;
  lowS: number;
  highS: number;
}

/** Steps with a mean, in runs without a gap: a line across a gap would claim what nobody saw. */
export function runsOf(delay: DelayOverTime): DelayPoint[][] {
  const runs: DelayPoint[][] = [];
  let open: DelayPoint[] | null = null;
  delay.meanS.forEach((meanS, k) => {
    if (!Number.isFinite(meanS)) {
      open = null;
      return;
    }
    if (!open) runs.push((open = []));
    open.push({ tS: delay.fromS + (k + 0.5) * delay.stepS, meanS, lowS: delay.lowS[k], highS: delay.highS[k] });
  });
  return runs;
}

function drawRun(ctx: CanvasRenderingContext2D, run: DelayPoint[], scales: StripScales, y: (s: number) => number): void {
  const known = run.filter((point) => Number.isFinite(point.lowS));
  ctx.fillStyle = BAND;
  ctx.beginPath();
  for (const point of known) ctx.lineTo(scales.x(point.tS), y(point.highS));
  for (const point of known.toReversed()) ctx.lineTo(scales.x(point.tS), y(point.lowS));
  ctx.fill();
  ctx.strokeStyle = COLORS.ink;
  ctx.fillStyle = COLORS.ink;
  ctx.lineWidth = 2;
  ctx.lineJoin = "round";
  ctx.beginPath();
  for (const point of run) ctx.lineTo(scales.x(point.tS), y(point.meanS));
  ctx.stroke();
  if (run.length === 1) ctx.fillRect(scales.x(run[0].tS) - 2, y(run[0].meanS) - 2, 4, 4);
}

function drawBounds(ctx: CanvasRenderingContext2D, layout: StripLayout, box: Box, topS: number, y: (s: number) => number): void {
  ctx.font = `${layout.fontPx}px ${FONT}`;
  ctx.strokeStyle = COLORS.rule;
  ctx.textBaseline = "middle";
  const squareX = box.left + box.width + (layout.isNarrow ? 7 : 16);
  const bands = losBands(topS);
  const ticks = delayTicks(topS, box.height, layout.fontPx);
  ctx.lineWidth = 1;
  for (const value of new Set([...bands.map((band) => band.fromS), ...ticks])) {
    const line = Math.round(y(value)) + 0.5;
    ctx.beginPath();
    ctx.moveTo(box.left, line);
    ctx.lineTo(box.left + box.width, line);
    ctx.stroke();
  }
  ctx.fillStyle = COLORS.inkSoft;
  ctx.textAlign = "right";
  for (const value of ticks) ctx.fillText(String(value), box.left - 9, Math.round(y(value)) + 0.5);
  const middles = bands.map((band) => (y(band.fromS) + y(band.toS)) / 2);
  const places = spreadUpwards(middles, LETTER_PX + 2, box.top + box.height);
  bands.forEach((band, k) => drawLetter(ctx, band.letter, squareX, places[k], { x: box.left + box.width, y: middles[k] }));
}

const LETTER_PX = 17;

/** Moves marks that would overlap upwards, lowest first, and as little as it takes; none stands below `bottom`. */
export function spreadUpwards(middles: number[], apart: number, bottom: number): number[] {
  let last = Infinity;
  return middles.map((middle) => {
    last = Math.min(middle, last - apart, bottom - apart / 2 + 4);
    return last;
  });
}

/** A letter in a square, tied to the middle of its band. */
function drawLetter(ctx: CanvasRenderingContext2D, letter: string, left: number, middleY: number, band: { x: number; y: number }): void {
  ctx.save();
  ctx.strokeStyle = COLORS.rule;
  ctx.lineWidth = 1;
  ctx.beginPath();
  ctx.moveTo(band.x + 1, band.y);
  ctx.lineTo(left, middleY);
  ctx.stroke();
  ctx.strokeStyle = COLORS.ink;
  ctx.lineWidth = 1.25;
  ctx.strokeRect(left + 0.5, Math.round(middleY) - 7.5, 16, 16);
  ctx.font = `600 12px ${FONT}`;
  ctx.fillStyle = COLORS.ink;
  ctx.textAlign = "center";
  ctx.fillText(letter, left + 8.5, Math.round(middleY) + 1);
  ctx.restore();
}

/** Where the delay arises along the leg: bars beside the strip's rows, seconds per vehicle in each row. */
export function drawProfile(ctx: CanvasRenderingContext2D, layout: StripLayout, scales: StripScales, picture: StripPicture, words: StripWords): void {
  const box = layout.profile;
  if (!box) return;
  const { bottomM, cellM } = picture.strip.spec;
  const most = Math.max(0.1, ...Array.from(picture.delayByRowS).filter(Number.isFinite));
  const step = niceStep(most, 2);
  const top = Math.ceil(most / step) * step;
  const bottom = box.top + box.height;
  ctx.save();
  ctx.font = `${layout.fontPx}px ${FONT}`;
  ctx.textAlign = "center";
  ctx.textBaseline = "middle";
  ctx.strokeStyle = COLORS.rule;
  for (let value = 0; value <= top + 1e-9; value += step) {
    const x = Math.round(box.left + (box.width * value) / top) + 0.5;
    ctx.beginPath();
    ctx.moveTo(x, box.top);
    ctx.lineTo(x, bottom);
    ctx.stroke();
    ctx.fillStyle = COLORS.inkSoft;
    ctx.fillText(String(Number(value.toPrecision(3))), x, bottom + 17);
  }
  ctx.fillText(words.profileAxis, box.left + box.width / 2, bottom + 36);
  ctx.fillStyle = COLORS.ink;
  picture.delayByRowS.forEach((excessS, row) => {
    if (!(excessS > 0)) return;
    const y0 = scales.y(bottomM + row * cellM);
    const y1 = Math.max(box.top, scales.y(bottomM + (row + 1) * cellM));
    ctx.fillRect(box.left, y1 + 1, (box.width * excessS) / top, Math.max(1, y0 - y1 - 1.5));
  });
  ctx.restore();
}
