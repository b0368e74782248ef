import { cellAt, cellCentre } from "@/core/strips/strip";
import { formatClock, formatLength, formatNumber, formatSeconds, formatSpeed, lengthNumber, type Units } from "@/ui/format";
import type { StripPicture } from "./strip-picture";

export type CursorMove = "earlier" | "later" | "farther" | "nearer" | "first" | "last";

/** Cell where a cursor starts: the middle of the window, beside the stop line. */
export function firstCell(picture: StripPicture): number {
  const { fromS, toS, bottomM } = picture.window;
  return cellAt(picture.strip.spec, (fromS + toS) / 2, Math.max(0, bottomM) + picture.strip.spec.cellM / 2);
}

/** The neighbouring cell, `by` steps away, kept inside the strip and its window. */
export function moveCursor(picture: StripPicture, cell: number, move: CursorMove, by: number): number {
  const { columns, rows } = picture.strip.spec;
  const column = cell % columns;
  const row = (cell - column) / columns;
  const [first, last] = columnsInWindow(picture, row);
  const along = { earlier: -by, later: by, farther: 0, nearer: 0, first: -columns, last: columns }[move];
  const up = { earlier: 0, later: 0, farther: by, nearer: -by, first: 0, last: 0 }[move];
  const nextRow = Math.min(rows - 1, Math.max(0, row + up));
  const [low, high] = nextRow === row ? [first, last] : columnsInWindow(picture, nextRow);
  return nextRow * columns + Math.min(high, Math.max(low, column + along));
}

/** First and last column whose cells in a row have their middle in the window. */
function columnsInWindow({ strip: { spec }, window }: StripPicture, row: number): [number, number] {
  const middle = cellCentre(spec, row * spec.columns).tS;
  const first = Math.max(0, Math.ceil((window.fromS - middle) / spec.cellS));
  const last = Math.min(spec.columns - 1, Math.floor((window.toS - middle - 1e-6) / spec.cellS));
  return [first, Math.max(first, last)];
}

export interface ReadOut {
  /** "17:08, 120 m" */
  where: string;
  /** "7 km/h, 14 vehicles, 9 days" */
  cell: string;
  /** "tail at 246 m (221 to 268)" */
  tail: string | null;
  /** "delay 63 s (55 to 71)" */
  delay: string | null;
}

export interface ReadOutWords {
  units: Units;
  locale: string;
  isTypical: boolean;
}

/** What the strip says at a cell, in words. */
export function readOut(picture: StripPicture, cell: number, words: ReadOutWords): ReadOut {
  const { tS, sM } = cellCentre(picture.strip.spec, cell);
  return {
    where: `${formatClock(tS / 60)}, ${formatLength(sM, words.units, words.locale)}`,
    cell: cellText(picture, cell, words),
    tail: tailText(picture, tS, words),
    delay: delayText(picture, tS, words.locale),
  };
}

export function readOutText({ where, cell, tail, delay }: ReadOut): string {
  return [where, cell, tail, delay].filter(Boolean).join("; ");
}

function cellText({ strip, speeds }: StripPicture, cell: number, { units, locale, isTypical }: ReadOutWords): string {
  const vehicles = strip.vehicles[cell];
  const speed = speeds[cell];
  if (Number.isNaN(speed)) return "no vehicle seen";
  if (vehicles === 0) return `${formatSpeed(speed, units, locale)} from neighbouring cells, no vehicle seen here`;
  const seen = `${formatSpeed(Math.max(0, speed), units, locale)}, ${vehicles} ${vehicles === 1 ? "vehicle" : "vehicles"}`;
  const days = strip.days[cell];
  return isTypical ? `${seen}, ${days} ${days === 1 ? "day" : "days"}` : seen;
}

function tailText({ tail }: StripPicture, tS: number, { units, locale }: ReadOutWords): string | null {
  const column = Math.floor((tS - tail.fromS) / tail.columnS);
  const reach = tail.reachM[column];
  if (!(reach >= 0)) return null;
  if (reach === 0) return "no standing queue";
  const [low, high] = [tail.lowM[column], tail.highM[column]].map((endM) => lengthNumber(endM, units, locale));
  const span = Number.isNaN(tail.lowM[column]) ? "" : ` (${low} to ${high})`;
  return `tail at ${formatLength(reach, units, locale)}${span}`;
}

function delayText({ delay }: StripPicture, tS: number, locale: string): string | null {
  const step = Math.floor((tS - delay.fromS) / delay.stepS);
  const mean = delay.meanS[step];
  if (!Number.isFinite(mean)) return null;
  const span = Number.isFinite(delay.lowS[step]) ? ` (${formatNumber(delay.lowS[step], locale)} to ${formatNumber(delay.highS[step], locale)})` : "";
  return `delay ${formatSeconds(mean, locale)}${span}`;
}
