import type { ScreenDay } from "./types";

/** The slice without the cells and leg quarters for which the questions say no. O(size of the slice). */
export function keepInScreenDay(day: ScreenDay, keepMovement: (key: number) => boolean, keepLeg: (key: number) => boolean): ScreenDay {
  const cells = indicesWhere(day.cells, (c) => keepMovement(day.movement[c]));
  const rows = cells.flatMap((c) => range(day.offset[c], day.offset[c + 1]));
  const offset = new Uint32Array(cells.length + 1);
  cells.forEach((c, k) => (offset[k + 1] = offset[k] + day.offset[c + 1] - day.offset[c]));
  const legs = indicesWhere(day.legQuarters, (k) => keepLeg(day.leg[k]));
  return {
    day: day.day,
    methodVersion: day.methodVersion,
    cells: cells.length,
    movement: Uint32Array.from(cells, (c) => day.movement[c]),
    quarter: Uint8Array.from(cells, (c) => day.quarter[c]),
    offset,
    delayS: Float32Array.from(rows, (i) => day.delayS[i]),
    stops: Uint8Array.from(rows, (i) => day.stops[i]),
    vehicle: Uint32Array.from(rows, (i) => day.vehicle[i]),
    legQuarters: legs.length,
    leg: Uint32Array.from(legs, (k) => day.leg[k]),
    legQuarter: Uint8Array.from(legs, (k) => day.legQuarter[k]),
    reachM: Float32Array.from(legs, (k) => day.reachM[k]),
    reachEstimateM: Float32Array.from(legs, (k) => day.reachEstimateM[k]),
    spilledS: Float32Array.from(legs, (k) => day.spilledS[k]),
    observedS: Float32Array.from(legs, (k) => day.observedS[k]),
  };
}

function indicesWhere(length: number, keep: (index: number) => boolean): number[] {
  return range(0, length).filter(keep);
}

function range(from: number, to: number): number[] {
  return Array.from({ length: to - from }, (_, i) => from + i);
}
