import type { CatalogueIndex } from "./catalogue-index";
import type { ScreenDay } from "./types";

const QUARTERS = 96;
const ABSENT = 0xffffffff;

/** What every query of a day needs and none changes: sums of its cells, dense numbers, where quarters begin. */
export interface PreparedDay {
  /** Dense movement of each cell; `ABSENT` where the catalogue has none. */
  unit: Uint32Array;
  delayS: Float32Array;
  delaySq: Float32Array;
  stopped: Uint16Array;
  stops: Uint16Array;
  /** Cells of quarter q: from quarterStart[q] to quarterStart[q + 1]; likewise entries of legs. */
  quarterStart: Uint32Array;
  legUnit: Uint32Array;
  legQuarterStart: Uint32Array;
}

const prepared = new WeakMap<ScreenDay, { index: CatalogueIndex; day: PreparedDay }>();

export function isListed(unit: number): boolean {
  return unit !== ABSENT;
}

/** Done once for a day and catalogue as long as both objects live. O(traversals). */
export function prepareDay(day: ScreenDay, index: CatalogueIndex): PreparedDay {
  const known = prepared.get(day);
  if (known?.index === index) return known.day;
  const fresh = prepare(day, index);
  prepared.set(day, { index, day: fresh });
  return fresh;
}

function prepare(day: ScreenDay, index: CatalogueIndex): PreparedDay {
  const { cells } = day;
  const out: PreparedDay = {
    unit: new Uint32Array(cells),
    delayS: new Float32Array(cells),
    delaySq: new Float32Array(cells),
    stopped: new Uint16Array(cells),
    stops: new Uint16Array(cells),
    quarterStart: startsOf(day.quarter),
    legUnit: Uint32Array.from(day.leg, (key) => index.legByKey.get(key) ?? ABSENT),
    legQuarterStart: startsOf(day.legQuarter),
  };
  for (let c = 0; c < cells; c++) {
    out.unit[c] = index.movementByKey.get(day.movement[c]) ?? ABSENT;
    let [sum, squares, stopped, stops] = [0, 0, 0, 0];
    for (let i = day.offset[c]; i < day.offset[c + 1]; i++) {
      sum += day.delayS[i];
      squares += day.delayS[i] * day.delayS[i];
      stops += day.stops[i];
      if (day.stops[i] > 0) stopped += 1;
    }
    out.delayS[c] = sum;
    out.delaySq[c] = squares;
    out.stopped[c] = stopped;
    out.stops[c] = stops;
  }
  return out;
}

/** First index of each quarter in an ascending column, and its length at the end. */
function startsOf(quarter: Uint8Array): Uint32Array {
  const starts = new Uint32Array(QUARTERS + 1);
  for (const q of quarter) starts[q + 1] += 1;
  for (let q = 0; q < QUARTERS; q++) starts[q + 1] += starts[q];
  return starts;
}
