import type { ByInterval, LegFigures, MovementFigures } from "./types";

export const QUARTER_S = 900;
const SPILL_SHARE_OF_STORAGE = 0.9;

/** Quantile by linear interpolation between order statistics (Hyndman-Fan type 7). */
function quantile(sorted: number[], p: number): number {
  const h = (sorted.length - 1) * p;
  const low = Math.floor(h);
  const high = Math.min(low + 1, sorted.length - 1);
  return sorted[low] + (h - low) * (sorted[high] - sorted[low]);
}

/** One passage as the summary needs it; time of the stop line decides the quarter. */
export interface MeasuredPassage {
  stopLineS: number;
  delayS: number;
  stops: number;
}

export function intervalNames(startMs: number, seconds: number): string[] {
  return Array.from({ length: Math.ceil(seconds / QUARTER_S) }, (_, k) =>
    new Date(startMs + k * QUARTER_S * 1000).toISOString().replace(".000Z", "Z"),
  );
}

export function summarisePassages(passages: MeasuredPassage[], names: string[]): ByInterval<MovementFigures> {
  const figures: ByInterval<MovementFigures> = {};
  const put = (name: string, part: MeasuredPassage[]) => {
    if (part.length > 0) figures[name] = movementFigures(part);
  };
  put("all", passages);
  names.forEach((name, k) => put(name, passages.filter((p) => Math.floor(p.stopLineS / QUARTER_S) === k)));
  return figures;
}

function movementFigures(passages: MeasuredPassage[]): MovementFigures {
  const n = passages.length;
  const delays = passages.map((p) => p.delayS).sort((a, b) => a - b);
  return {
    vehicles: n,
    meanDelayS: round(delays.reduce((a, b) => a + b, 0) / n, 3),
    p95DelayS: round(quantile(delays, 0.95), 2),
    stopShare: round(passages.filter((p) => p.stops > 0).length / n, 4),
    stopsPerVehicle: round(passages.reduce((sum, p) => sum + p.stops, 0) / n, 4),
  };
}

export function summariseTails(tails: Float32Array, storageM: number | null, names: string[]): ByInterval<LegFigures> {
  const figures: ByInterval<LegFigures> = { all: legFigures(tails, storageM) };
  names.forEach((name, k) => (figures[name] = legFigures(tails.subarray(k * QUARTER_S, (k + 1) * QUARTER_S), storageM)));
  return figures;
}

function legFigures(tails: Float32Array, storageM: number | null): LegFigures {
  let reachM = 0;
  let spilledS = 0;
  for (const tail of tails) {
    if (tail > reachM) reachM = tail;
    if (storageM !== null && tail >= SPILL_SHARE_OF_STORAGE * storageM) spilledS++;
  }
  return { reachM: round(reachM, 1), spillbackShare: storageM === null ? null : round(spilledS / tails.length, 4) };
}

export function round(value: number, digits: number): number {
  return Number(value.toFixed(digits));
}
