import type { ScreenDay } from "./types";

interface Row {
  slice: ScreenDay;
  movement: number;
  quarter: number;
  at: number;
}

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
  return { day, methodVersion, ...mergedCells(slices), ...mergedLegs(slices) };
}

function mergedCells(slices: readonly ScreenDay[]) {
  const rows: Row[] = [];
  for (const slice of slices) {
    for (let c = 0; c < slice.cells; c++) {
      const [movement, quarter] = [slice.movement[c], slice.quarter[c]];
      for (let at = slice.offset[c]; at < slice.offset[c + 1]; at++) rows.push({ slice, movement, quarter, at });
    }
  }
  rows.sort((a, b) => a.quarter - b.quarter || a.movement - b.movement || vehicle(a) - vehicle(b) || delay(a) - delay(b));
  const kept = rows.filter((row, k) => k === 0 || !isSameCell(row, rows[k - 1]) || vehicle(row) !== vehicle(rows[k - 1]) || delay(row) !== delay(rows[k - 1]));
  const starts = kept.flatMap((row, k) => (k === 0 || !isSameCell(row, kept[k - 1]) ? [k] : []));
  return {
    cells: starts.length,
    movement: Uint32Array.from(starts, (k) => kept[k].movement),
    quarter: Uint8Array.from(starts, (k) => kept[k].quarter),
    offset: Uint32Array.from([...starts, kept.length]),
    delayS: Float32Array.from(kept, delay),
    stops: Uint8Array.from(kept, (row) => row.slice.stops[row.at]),
    vehicle: Uint32Array.from(kept, vehicle),
  };
}

function isSameCell(a: Row, b: Row): boolean {
  return a.quarter === b.quarter && a.movement === b.movement;
}

function vehicle(row: Row): number {
  return row.slice.vehicle[row.at];
}

function delay(row: Row): number {
  return row.slice.delayS[row.at];
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
