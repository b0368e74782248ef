import { COLORS } from "@/ui/scales";
import { formatClock } from "@/ui/format";
import { drawCells } from "./draw-cells";
import { drawTail, FONT } from "./draw-lines";
import { scalesOf, type StripLayout } from "./strip-layout";
import type { StripPicture } from "./strip-picture";

const FOOT_PX = 20;

/** A strip without its axes: cells, tail line, storage line, stop line and the ends of the time axis. */
export function drawSmall(ctx: CanvasRenderingContext2D, width: number, height: number, picture: StripPicture): void {
  const plot = { left: 1, top: 1, width: width - 2, height: height - FOOT_PX - 1 };
  const layout: StripLayout = { width, height, isNarrow: true, fontPx: 13, plot, delay: plot, profile: null };
  const scales = scalesOf(plot, picture.window);
  drawCells(ctx, plot, scales, picture);
  const { storageM, window } = picture;
  if (storageM !== null && storageM <= window.topM) {
    ctx.save();
    ctx.strokeStyle = COLORS.ink;
    ctx.setLineDash([6, 4]);
    ctx.beginPath();
    ctx.moveTo(plot.left, scales.y(storageM));
    ctx.lineTo(plot.left + plot.width, scales.y(storageM));
    ctx.stroke();
    ctx.restore();
  }
  drawTail(ctx, layout, scales, picture);
  const bottom = plot.top + plot.height;
  ctx.fillStyle = COLORS.ink;
  ctx.fillRect(plot.left, bottom - 1, plot.width, 2.5);
  ctx.font = `13px ${FONT}`;
  ctx.fillStyle = COLORS.inkSoft;
  ctx.textBaseline = "middle";
  ctx.textAlign = "left";
  ctx.fillText(formatClock(window.fromS / 60), plot.left, bottom + 12);
  ctx.textAlign = "right";
  ctx.fillText(formatClock(window.toS / 60), plot.left + plot.width, bottom + 12);
}

/** Pixels of height for a leg, so that all small strips of a junction have one scale. */
export function smallHeight(lengthM: number, longestM: number): number {
  return FOOT_PX + Math.max(40, Math.round((150 * lengthM) / Math.max(1, longestM)));
}
