import type { ScreenDay } from "./types";

/** Slices are never changed once made: the same ones merge to the same. */
const merged = new WeakMap<ScreenDay, { slices: readonly ScreenDay[]; result: ScreenDay }>();

/**
 * One slice from several of the same local day, as from different uploads. A traversal that is in more than one
 * (same movement, vehicle, quarter and delay) counts once; a leg's quarter keeps the farthest reach and the longest
 * observation. Order of the slices does not matter, and merging twice changes nothing. O(n log n).
 */
export function mergeScreenDays(slices: readonly ScreenDay[]): ScreenDay {
  if (slices.length === 0) throw new RangeError("Nothing to merge.");
  const [{ day, methodVersion }] = slices;
  for (const slice of slices) {
    if (slice.day !== day) throw new RangeError(`Slices of different days, ${day} and ${slice.day}, cannot be merged.`);
    if (slice.methodVersion !== methodVersion) {
      throw new RangeError(`Slices of method versions ${methodVersion} and ${slice.methodVersion} cannot be merged.`);
    }
  }
  if (slices.length === 1) return slices[0];
  const known = merged.get(slices[0]);
  if (known && known.slices.length === slices.length && known.slices.every((slice, k) => slice === slices[k])) return known.result;
  const result = { day, methodVersion, ...mergedCells(slices), ...mergedLegs(slices) };
  merged.set(slices[0], { slices: [...slices], result });
  return result;
}

function mergedCells(slices: readonly ScreenDay[]) {
  const rows = flatten(slices);
  const { quarter, movement, vehicle, delayS } = rows;
  const isSameCell = (a: number, b: number): boolean => quarter[a] === quarter[b] && movement[a] === movement[b];
  const order = Uint32Array.from(quarter, (_, i) => i).sort(
    (a, b) => quarter[a] - quarter[b] || movement[a] - movement[b] || vehicle[a] - vehicle[b] || delayS[a] - delayS[b],
  );
  const kept = order.filter((i, k) => {
    const last = order[k - 1];
    return k === 0 || !isSameCell(i, last) || vehicle[i] !== vehicle[last] || delayS[i] !== delayS[last];
  });
  const starts: number[] = [];
  for (let k = 0; k < kept.length; k++) if (k === 0 || !isSameCell(kept[k], kept[k - 1])) starts.push(k);
  return {
    cells: starts.length,
    movement: Uint32Array.from(starts, (k) => movement[kept[k]]),
    quarter: Uint8Array.from(starts, (k) => quarter[kept[k]]),
    offset: Uint32Array.from([...starts, kept.length]),
    delayS: Float32Array.from(kept, (i) => delayS[i]),
    stops: Uint8Array.from(kept, (i) => rows.stops[i]),
    vehicle: Uint32Array.from(kept, (i) => vehicle[i]),
  };
}

/** One entry for each traversal of each slice. */
function flatten(slices: readonly ScreenDay[]) {
  const length = slices.reduce((sum, slice) => sum + slice.delayS.length, 0);
  const rows = {
    quarter: new Uint8Array(length),
    movement: new Uint32Array(length),
    vehicle: new Uint32Array(length),
    delayS: new Float32Array(length),
    stops: new Uint8Array(length),
  };
  let from = 0;
  for (const slice of slices) {
    for (let c = 0; c < slice.cells; c++) {
      rows.quarter.fill(slice.quarter[c], from + slice.offset[c], from + slice.offset[c + 1]);
      rows.movement.fill(slice.movement[c], from + slice.offset[c], from + slice.offset[c + 1]);
    }
    rows.vehicle.set(slice.vehicle, from);
    rows.delayS.set(slice.delayS, from);
    rows.stops.set(slice.stops, from);
    from += slice.delayS.length;
  }
  return rows;
}

const LEG_FIGURES = ["reachM", "reachEstimateM", "spilledS", "observedS"] as const;

function mergedLegs(slices: readonly ScreenDay[]) {
  const best = new Map<number, { leg: number; quarter: number } & Record<(typeof LEG_FIGURES)[number], number>>();
  for (const slice of slices) {
    for (let k = 0; k < slice.legQuarters; k++) {
      const key = slice.legQuarter[k] * 2 ** 32 + slice.leg[k];
      const row = best.get(key) ?? { leg: slice.leg[k], quarter: slice.legQuarter[k], reachM: NaN, reachEstimateM: NaN, spilledS: NaN, observedS: NaN };
      for (const name of LEG_FIGURES) row[name] = larger(row[name], slice[name][k]);
      best.set(key, row);
    }
  }
  const rows = [...best.values()].sort((a, b) => a.quarter - b.quarter || a.leg - b.leg);
  return {
    legQuarters: rows.length,
    leg: Uint32Array.from(rows, (r) => r.leg),
    legQuarter: Uint8Array.from(rows, (r) => r.quarter),
    reachM: Float32Array.from(rows, (r) => r.reachM),
    reachEstimateM: Float32Array.from(rows, (r) => r.reachEstimateM),
    spilledS: Float32Array.from(rows, (r) => r.spilledS),
    observedS: Float32Array.from(rows, (r) => r.observedS),
  };
}

function larger(a: number, b: number): number {
  return Number.isNaN(a) || b > a ? b : a;
}
