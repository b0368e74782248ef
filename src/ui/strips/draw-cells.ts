import type { StripSpec } from "@/core/strips/strip";
import { COLORS, SPEED_RAMP, rampColor } from "@/ui/scales";
import type { Box, StripScales } from "./strip-layout";
import type { StripPicture } from "./strip-picture";

const SHADES = 64;
let shades: string[] | undefined;
let pixels: Uint32Array | undefined;

/** Colour of a speed as a share of free speed; computed once for the whole ramp. */
export function shadeOf(share: number): string {
  shades ??= Array.from({ length: SHADES }, (_, i) => rampColor(SPEED_RAMP, i / (SHADES - 1)));
  return shades[shadeIndex(share)];
}

function shadeIndex(share: number): number {
  return Math.round(Math.min(1, Math.max(0, share)) * (SHADES - 1));
}

/**
 * Speed of every cell as colour: an image with one pixel for each cell, stretched over the plot in one stroke.
 * Leaning cells are rectangles under a sheared transformation.
 */
export function drawCells(ctx: CanvasRenderingContext2D, plot: Box, scales: StripScales, picture: StripPicture): void {
  const { startS, cellS, columns, bottomM, cellM, rows } = picture.strip.spec;
  const image = document.createElement("canvas");
  image.width = columns;
  image.height = rows;
  image.getContext("2d")?.putImageData(new ImageData(cellPixels(picture), columns, rows), 0, 0);
  const left = scales.x(startS);
  const top = scales.y(bottomM + rows * cellM);
  const width = scales.x(startS + columns * cellS) - left;
  ctx.save();
  clipTo(ctx, plot);
  shear(ctx, picture.strip.spec, scales);
  // Cells have edges; only cells that are narrower than a pixel are blended.
  ctx.imageSmoothingEnabled = width < columns;
  ctx.drawImage(image, left, top, width, scales.y(bottomM) - top);
  ctx.restore();
}

/** RGBA of each cell, the farthest row first; cells where no vehicle was seen stay clear. */
export function cellPixels({ strip, speeds, freeMs }: Pick<StripPicture, "strip" | "speeds" | "freeMs">): Uint8ClampedArray<ArrayBuffer> {
  const { columns, rows } = strip.spec;
  const image = new Uint32Array(columns * rows);
  pixels ??= Uint32Array.from({ length: SHADES }, (_, i) => pixelOf(shadeOf(i / (SHADES - 1))));
  for (let row = 0; row < rows; row++) {
    const to = (rows - 1 - row) * columns;
    for (let column = 0; column < columns; column++) {
      const speed = speeds[row * columns + column];
      if (!Number.isNaN(speed)) image[to + column] = pixels[shadeIndex(speed / freeMs)];
    }
  }
  return new Uint8ClampedArray(image.buffer);
}

/** The bytes R, G, B and 255 of "#RRGGBB" as the machine orders them in a word. */
function pixelOf(color: string): number {
  const channels = [1, 3, 5].map((at) => parseInt(color.slice(at, at + 2), 16));
  return new Uint32Array(Uint8Array.of(...channels, 255).buffer)[0];
}

/** Every vehicle's path as a fine line of ink with a pale edge, which shows it in a queue too. */
export function drawPaths(ctx: CanvasRenderingContext2D, plot: Box, scales: StripScales, { set, include }: StripPicture): void {
  ctx.save();
  clipTo(ctx, plot);
  ctx.lineJoin = "round";
  const [alpha, width] = set.tracks > 1500 ? [0.16, 0.6] : set.tracks > 300 ? [0.35, 0.9] : [0.8, 0.9];
  for (let i = 0; i < set.tracks; i++) {
    if (include[i] === 0) continue;
    ctx.beginPath();
    for (let p = set.offset[i]; p < set.offset[i + 1]; p++) ctx.lineTo(scales.x(set.tS[p]), scales.y(set.sM[p]));
    // Edges of many would bleach the cells.
    if (set.tracks <= 1500) stroke(ctx, COLORS.sheet, width * 2.8, alpha * 0.75);
    stroke(ctx, COLORS.ink, width, alpha);
  }
  ctx.restore();
}

function stroke(ctx: CanvasRenderingContext2D, color: string, width: number, alpha: number): void {
  ctx.strokeStyle = color;
  ctx.lineWidth = width;
  ctx.globalAlpha = alpha;
  ctx.stroke();
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
