import { COLORS } from "@/ui/scales";
import { formatClock, type Units } from "@/ui/format";
import { clipTo } from "./draw-cells";
import { lengthTicks, timeTicks, type StripLayout, type StripScales } from "./strip-layout";
import type { StripPicture } from "./strip-picture";

/** What the drawing says in words. */
export interface StripWords {
  units: Units;
  lengthAxis: string;
  delayAxis: string;
  profileAxis: string;
  stopLine: string;
  storage: string | null;
  /** The junction behind, where it is known. */
  upstream: string | null;
}

export const FONT = '"Barlow Semi Condensed", Barlow, sans-serif';

/** The tail line, broken where the sample cannot say. */
export function drawTail(ctx: CanvasRenderingContext2D, layout: StripLayout, scales: StripScales, { tail }: StripPicture): void {
  ctx.save();
  clipTo(ctx, { ...layout.plot, top: layout.plot.top - 3, height: layout.plot.height + 6 });
  ctx.lineJoin = "round";
  for (const [color, width] of [[COLORS.sheet, 3.8], [COLORS.tail, 2.1]] as const) {
    ctx.strokeStyle = color;
    ctx.lineWidth = width;
    ctx.globalAlpha = color === COLORS.sheet ? 0.75 : 1;
    ctx.beginPath();
    let isDown = false;
    for (let column = 0; column < tail.columns; column++) {
      const reach = tail.reachM[column];
      if (Number.isNaN(reach)) {
        isDown = false;
        continue;
      }
      const x = scales.x(tail.fromS + (column + 0.5) * tail.columnS);
      if (isDown) ctx.lineTo(x, scales.y(reach));
      else ctx.moveTo(x, scales.y(reach));
      isDown = true;
    }
    ctx.stroke();
  }
  ctx.restore();
}

export function drawStorage(ctx: CanvasRenderingContext2D, layout: StripLayout, scales: StripScales, picture: StripPicture, words: StripWords): void {
  const { storageM, window } = picture;
  if (storageM === null || storageM > window.topM) return;
  const { plot } = layout;
  const y = Math.round(scales.y(storageM)) + 0.5;
  ctx.save();
  ctx.strokeStyle = COLORS.ink;
  ctx.lineWidth = 1.4;
  ctx.setLineDash([8, 5]);
  ctx.beginPath();
  ctx.moveTo(plot.left, y);
  ctx.lineTo(plot.left + plot.width, y);
  ctx.stroke();
  ctx.restore();
  drawFull(ctx, layout, scales, picture, y);
  const label = words.storage ?? "storage";
  if (layout.isNarrow) return drawTag(ctx, layout, label, plot.left + plot.width - 4, Math.max(plot.top + 11, y - 10));
  drawSideLabel(ctx, layout, words.upstream === null ? label : `${label},`, y + 5, true);
  if (words.upstream !== null) drawSideLabel(ctx, layout, words.upstream, y + 23, false);
}

/** The storage line in vermilion while the leg is full. */
function drawFull(ctx: CanvasRenderingContext2D, { plot }: StripLayout, scales: StripScales, { tail, full }: StripPicture, y: number): void {
  ctx.save();
  clipTo(ctx, plot);
  ctx.fillStyle = COLORS.tail;
  for (let column = 0; column < tail.columns; column++) {
    if (full[column] === 0) continue;
    const x = scales.x(tail.fromS + column * tail.columnS);
    ctx.fillRect(x, y - 2, scales.x(tail.fromS + (column + 1) * tail.columnS) - x + 0.5, 4);
  }
  ctx.restore();
}

export function drawAxes(ctx: CanvasRenderingContext2D, layout: StripLayout, scales: StripScales, picture: StripPicture, words: StripWords): void {
  const { plot, fontPx } = layout;
  const bottom = plot.top + plot.height;
  ctx.save();
  ctx.font = `${fontPx}px ${FONT}`;
  ctx.fillStyle = COLORS.inkSoft;
  ctx.textAlign = "right";
  ctx.textBaseline = "middle";
  for (const { sM, label } of lengthTicks(picture.window.topM, plot.height, words.units)) ctx.fillText(label, plot.left - 9, scales.y(sM));
  ctx.textAlign = "center";
  ctx.strokeStyle = COLORS.ink;
  ctx.lineWidth = 1;
  for (const tS of timeTicks(picture.window, plot.width, fontPx * 4.4)) {
    const x = Math.round(scales.x(tS)) + 0.5;
    ctx.beginPath();
    ctx.moveTo(x, bottom);
    ctx.lineTo(x, bottom + 6);
    ctx.stroke();
    ctx.fillText(formatClock(tS / 60), clampText(ctx, layout, x, formatClock(tS / 60)), bottom + 17);
  }
  ctx.lineWidth = 3;
  ctx.beginPath();
  ctx.moveTo(plot.left - (layout.isNarrow ? 4 : 8), bottom + 0.5);
  ctx.lineTo(plot.left + plot.width, bottom + 0.5);
  ctx.stroke();
  ctx.restore();
  drawUpright(ctx, layout, words.lengthAxis, plot.top + plot.height / 2);
  if (!layout.isNarrow) drawSideLabel(ctx, layout, words.stopLine, bottom + 4, true);
}

/** A label that runs up the left edge. */
export function drawUpright(ctx: CanvasRenderingContext2D, layout: StripLayout, text: string, middleY: number): void {
  ctx.save();
  ctx.font = `${layout.isNarrow ? 11.5 : layout.fontPx}px ${FONT}`;
  ctx.fillStyle = COLORS.inkSoft;
  ctx.textAlign = "center";
  ctx.textBaseline = "middle";
  ctx.translate(layout.isNarrow ? 7 : layout.plot.left - 50, middleY);
  ctx.rotate(-Math.PI / 2);
  ctx.fillText(text, 0, 0);
  ctx.restore();
}

function drawSideLabel(ctx: CanvasRenderingContext2D, layout: StripLayout, text: string, y: number, isFirst: boolean): void {
  const left = (layout.profile ?? layout.plot).left + (layout.profile ?? layout.plot).width + 14;
  ctx.font = `${layout.fontPx}px ${FONT}`;
  ctx.fillStyle = isFirst ? COLORS.ink : COLORS.inkSoft;
  ctx.textAlign = "left";
  ctx.textBaseline = "alphabetic";
  wrapWords(text, layout.width - left - 4, (line) => ctx.measureText(line).width).forEach((line, k) => ctx.fillText(line, left, y + k * 18));
}

/** Lines of whole words, each as long as the width allows. */
export function wrapWords(text: string, width: number, widthOf: (line: string) => number): string[] {
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(" ")) {
    const longer = line === "" ? word : `${line} ${word}`;
    if (line !== "" && widthOf(longer) > width) {
      lines.push(line);
      line = word;
    } else line = longer;
  }
  return line === "" ? lines : [...lines, line];
}

/** A label inside the plot, on a piece of sheet. */
function drawTag(ctx: CanvasRenderingContext2D, layout: StripLayout, text: string, right: number, y: number): void {
  ctx.save();
  ctx.font = `${layout.fontPx}px ${FONT}`;
  const width = ctx.measureText(text).width;
  ctx.fillStyle = COLORS.sheet;
  ctx.fillRect(right - width - 5, y - 9, width + 9, 18);
  ctx.fillStyle = COLORS.ink;
  ctx.textAlign = "right";
  ctx.textBaseline = "middle";
  ctx.fillText(text, right, y + 0.5);
  ctx.restore();
}

function clampText(ctx: CanvasRenderingContext2D, layout: StripLayout, x: number, text: string): number {
  const half = ctx.measureText(text).width / 2;
  return Math.min(layout.width - half - 1, Math.max(half + 1, x));
}
