import { drawCells, drawPaths } from "./draw-cells";
import { drawDelay, drawProfile } from "./draw-delay";
import { drawAxes, drawStorage, drawTail, FONT, type StripWords } from "./draw-lines";
import { scalesOf, type StripLayout } from "./strip-layout";
import type { StripPicture } from "./strip-picture";

/** The whole strip with its delay curve, in CSS pixels; the caller has scaled the context and painted the ground. */
export function drawPicture(ctx: CanvasRenderingContext2D, layout: StripLayout, picture: StripPicture, words: StripWords): void {
  const scales = scalesOf(layout.plot, picture.window);
  drawCells(ctx, layout.plot, scales, picture);
  if (picture.hasPaths) drawPaths(ctx, layout.plot, scales, picture);
  drawStorage(ctx, layout, scales, picture, words);
  drawTail(ctx, layout, scales, picture);
  drawAxes(ctx, layout, scales, picture, words);
  drawProfile(ctx, layout, scales, picture, words);
  drawDelay(ctx, layout, scales, picture, words);
}

const FACES = [`14px ${FONT}`, `600 14px ${FONT}`];

/** A canvas draws with what is loaded: ask for the faces before the first stroke. */
export async function loadFaces(): Promise<void> {
  await Promise.all(FACES.map((face) => document.fonts.load(face)));
}

/** Draws at once where the faces are there, else as soon as they are. Answers a function that calls it off. */
export function drawWithFaces(draw: () => void): () => void {
  if (FACES.every((face) => document.fonts.check(face))) {
    draw();
    return () => undefined;
  }
  let isOff = false;
  void loadFaces().then(() => isOff || draw());
  return () => {
    isOff = true;
  };
}
