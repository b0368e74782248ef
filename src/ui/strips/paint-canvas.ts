import { COLORS } from "@/ui/scales";

/** Sizes a canvas for the screen's pixels, lays the sheet and hands over a context in CSS pixels. */
export function paintCanvas(canvas: HTMLCanvasElement | null, width: number, height: number, ratio: number, draw: (ctx: CanvasRenderingContext2D) => void): void {
  const ctx = canvas?.getContext("2d");
  if (!canvas || !ctx) return;
  canvas.width = Math.round(width * ratio);
  canvas.height = Math.round(height * ratio);
  ctx.setTransform(ratio, 0, 0, ratio, 0, 0);
  ctx.fillStyle = COLORS.sheet;
  ctx.fillRect(0, 0, width, height);
  draw(ctx);
}
