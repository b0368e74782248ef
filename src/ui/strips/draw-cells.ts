import type { StripSpec } from "@/core/strips/strip";
import { COLORS, SPEED_RAMP, rampColor } from "@/ui/scales";
import type { Box, StripScales } from "./strip-layout";
import type { StripPicture } from "./strip-picture";

const SHADES = 64;
/** Overlap that hides the hairlines between neighbouring cells whose edges are blended. */
const OVERLAP_PX = 0.6;
let shades: string[] | undefined;

/** Colour of a speed as a share of free speed; computed once for the whole ramp. */
export function shadeOf(share: number): string {
  shades ??= Array.from({ length: SHADES }, (_, i) => rampColor(SPEED_RAMP, i / (SHADES - 1)));
  return shades[Math.round(Math.min(1, Math.max(0, share)) * (SHADES - 1))];
}

/** Speed of every cell as colour. Leaning cells are rectangles under a sheared transformation. */
export function drawCells(ctx: CanvasRenderingContext2D, plot: Box, scales: StripScales, picture: StripPicture): void {
  const { strip, speeds, freeMs } = picture;
  const { startS, cellS, columns, bottomM, cellM, rows } = strip.spec;
  ctx.save();
  clipTo(ctx, plot);
  shear(ctx, strip.spec, scales);
  const left = scales.x(startS);
  const widthPx = scales.x(startS + cellS) - left;
  for (let row = 0; row < rows; row++) {
    const top = scales.y(bottomM + (row + 1) * cellM);
    const heightPx = scales.y(bottomM + row * cellM) - top;
    for (let column = 0; column < columns; column++) {
      const speed = speeds[row * columns + column];
      if (Number.isNaN(speed)) continue;
      ctx.fillStyle = shadeOf(speed / freeMs);
      ctx.fillRect(left + column * widthPx, top - OVERLAP_PX, widthPx + OVERLAP_PX, heightPx + OVERLAP_PX);
    }
  }
  ctx.restore();
}

/** Every vehicle's path as a fine line of ink. */
export function drawPaths(ctx: CanvasRenderingContext2D, plot: Box, scales: StripScales, { set, include }: StripPicture): void {
  ctx.save();
  clipTo(ctx, plot);
  ctx.strokeStyle = COLORS.ink;
  ctx.globalAlpha = set.tracks > 1500 ? 0.16 : set.tracks > 300 ? 0.35 : 0.7;
  ctx.lineWidth = set.tracks > 1500 ? 0.6 : 0.9;
  for (let i = 0; i < set.tracks; i++) {
    if (include[i] === 0) continue;
    ctx.beginPath();
    for (let p = set.offset[i]; p < set.offset[i + 1]; p++) ctx.lineTo(scales.x(set.tS[p]), scales.y(set.sM[p]));
    ctx.stroke();
  }
  ctx.restore();
}

export function clipTo(ctx: CanvasRenderingContext2D, box: Box): void {
  ctx.beginPath();
  ctx.rect(box.left, box.top, box.width, box.height);
  ctx.clip();
}

/** x grows with distance from the stop line as cells lean along the wave: x + (y0 - y) * slope. */
function shear(ctx: CanvasRenderingContext2D, spec: StripSpec, scales: StripScales): void {
  const y0 = scales.y(0);
  const slope = (scales.x(1 / spec.waveMs) - scales.x(0)) / (y0 - scales.y(1));
  ctx.transform(1, 0, -slope, 1, slope * y0, 0);
}
