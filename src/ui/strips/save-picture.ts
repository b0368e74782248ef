import { COLORS } from "@/ui/scales";
import { shadeOf } from "./draw-cells";
import { FONT, wrapWords, type StripWords } from "./draw-lines";
import { drawPicture, loadFaces } from "./draw-picture";
import { layoutStrip } from "./strip-layout";
import type { StripPicture } from "./strip-picture";

/** Words that are burned into a picture, so that it says what it is wherever it ends up. */
export interface PictureWords {
  /** Junction, then leg. */
  above: string;
  title: string;
  caption: string;
  facts: string;
  free: string;
  tail: string;
  /** Of the storage line while it is solid; null where there is none. */
  full: string | null;
  cautions: string[];
}

const WIDTH = 1400;
const MARGIN = 36;
const RATIO = 2;
const HEAD = 142;
const LINE = 21;

/** The strip as a PNG of 2,800 pixels across, with caption, key and cautions. */
export async function pictureBlob(picture: StripPicture, words: StripWords, told: PictureWords): Promise<Blob> {
  await loadFaces();
  const layout = layoutStrip(WIDTH - 2 * MARGIN, 420);
  const canvas = document.createElement("canvas");
  const ctx = canvas.getContext("2d");
  if (!ctx) throw new Error("This browser cannot draw pictures.");
  ctx.font = `15px ${FONT}`;
  const cautions = wrapWords(told.cautions.join(" "), WIDTH - 2 * MARGIN, (line) => ctx.measureText(line).width);
  const height = HEAD + layout.height + 66 + cautions.length * LINE + MARGIN / 2;
  canvas.width = WIDTH * RATIO;
  canvas.height = Math.round(height * RATIO);
  ctx.scale(RATIO, RATIO);
  ctx.fillStyle = COLORS.sheet;
  ctx.fillRect(0, 0, WIDTH, height);
  drawHead(ctx, told);
  ctx.save();
  ctx.translate(MARGIN, HEAD);
  drawPicture(ctx, layout, picture, words);
  ctx.restore();
  drawKey(ctx, MARGIN + layout.plot.left, HEAD + layout.height + 22, told);
  ctx.font = `15px ${FONT}`;
  ctx.fillStyle = COLORS.inkSoft;
  cautions.forEach((line, k) => ctx.fillText(line, MARGIN, HEAD + layout.height + 66 + k * LINE));
  return new Promise((resolve, reject) => {
    canvas.toBlob((blob) => (blob ? resolve(blob) : reject(new Error("This browser could not make a picture."))), "image/png");
  });
}

/** Hands a file to the person. */
export function download(blob: Blob, name: string): void {
  const link = document.createElement("a");
  link.href = URL.createObjectURL(blob);
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 1000);
}

function drawHead(ctx: CanvasRenderingContext2D, told: PictureWords): void {
  ctx.fillStyle = COLORS.paper;
  ctx.fillRect(0, 0, WIDTH, HEAD - 14);
  ctx.fillStyle = COLORS.rule;
  ctx.fillRect(0, HEAD - 15, WIDTH, 1);
  write(ctx, told.above, 32, `17px ${FONT}`, COLORS.inkSoft);
  write(ctx, told.title, 62, `600 28px ${FONT}`, COLORS.ink);
  write(ctx, told.caption, 90, `17px ${FONT}`, COLORS.ink);
  write(ctx, told.facts, 114, `17px ${FONT}`, COLORS.inkSoft);
}

function write(ctx: CanvasRenderingContext2D, text: string, y: number, font: string, color: string): void {
  ctx.font = font;
  ctx.fillStyle = color;
  ctx.fillText(text, MARGIN, y, WIDTH - 2 * MARGIN);
}

function drawKey(ctx: CanvasRenderingContext2D, left: number, y: number, told: PictureWords): void {
  const swatches = 16;
  ctx.font = `15px ${FONT}`;
  ctx.textBaseline = "middle";
  let x = left;
  const say = (text: string) => {
    ctx.fillStyle = COLORS.inkSoft;
    ctx.fillText(text, x, y);
    x += ctx.measureText(text).width + 10;
  };
  say("stopped");
  for (let i = 0; i < swatches; i++) {
    ctx.fillStyle = shadeOf(i / (swatches - 1));
    ctx.fillRect(x + i * 12, y - 6, 12.5, 11);
  }
  x += swatches * 12 + 10;
  say(told.free);
  x += 30;
  ctx.fillStyle = COLORS.tail;
  ctx.fillRect(x, y - 1, 30, 2);
  x += 40;
  say(told.tail);
  x += 30;
  ctx.strokeStyle = COLORS.inkSoft;
  ctx.strokeRect(x + 0.5, y - 5.5, 16, 11);
  x += 26;
  say("no vehicle seen");
  if (told.full === null) return void (ctx.textBaseline = "alphabetic");
  x += 30;
  ctx.fillStyle = COLORS.tail;
  ctx.fillRect(x, y - 2, 30, 4);
  x += 40;
  say(told.full);
  ctx.textBaseline = "alphabetic";
}
