import { columnReach } from "@/core/queues/column-reach";
import { DEFAULT_QUEUE_OPTIONS, type QueueOptions } from "@/core/queues/options";
import type { Strip } from "./strip";

/**
 * Mean delay per vehicle read off a strip: the time in its cells beyond what the distance in them takes at
 * the reference pace, shared among the vehicles. Over rows from cordon to exit cordon it equals the mean
 * over traversals, since both are the same sums in another order. Not clipped at zero; NaN without vehicles.
 * `paceSPerM` is reference time by distance of the vehicles' movements, in s/m. O(cells).
 */
export function stripDelayS(strip: Strip, paceSPerM: number, vehicles: number): number {
  if (!(vehicles > 0)) return NaN;
  let excess = 0;
  for (let cell = 0; cell < strip.timeS.length; cell++) excess += strip.timeS[cell] - paceSPerM * strip.distanceM[cell];
  return excess / vehicles;
}

/**
 * Where along the leg the delay arises: excess over the reference pace in each row, seconds per vehicle, so
 * that the rows add up to the leg's delay. Vehicles are those of the row that most passed: its distance by
 * its length. NaN in rows without a vehicle. O(cells).
 */
export function delayByRow(strip: Strip, paceSPerM: number): Float32Array {
  const { rows, columns, cellM } = strip.spec;
  const time = new Float64Array(rows);
  const distance = new Float64Array(rows);
  for (let row = 0; row < rows; row++) {
    for (let cell = row * columns; cell < (row + 1) * columns; cell++) {
      time[row] += strip.timeS[cell];
      distance[row] += strip.distanceM[cell];
    }
  }
  const vehicles = Math.max(0, ...distance) / cellM;
  return Float32Array.from(time, (seconds, row) => (seconds > 0 && vehicles > 0 ? (seconds - paceSPerM * distance[row]) / vehicles : NaN));
}

/**
 * Reach of the congested cells that hang together with the stop line, for each column, metres: the farthest cell
 * slower than the speed at which a stop ends, tied to the line by such cells, now or within the last `memoryS`,
 * with head and gaps as in a standing column. NaN in columns without a vehicle, 0 where none is congested. Meant for one day and rectangles of
 * about 10 s: longer cells mix red with green, pooled days one day's queue with another's free street. O(cells × memory).
 */
export function congestedReaches(strip: Strip, options: Partial<QueueOptions> = {}): Float32Array {
  const { goSpeedMs, headM, gapM, memoryS } = { ...DEFAULT_QUEUE_OPTIONS, ...options };
  const { rows, columns, bottomM, cellM, cellS } = strip.spec;
  const memory = Math.floor(memoryS / cellS);
  const out = new Float32Array(columns).fill(NaN);
  const positions = new Float64Array(rows);
  const firstRow = Math.max(0, Math.ceil(-bottomM / cellM));
  for (let column = 0; column < columns; column++) {
    let congested = 0;
    let isSeen = false;
    for (let row = firstRow; row < rows; row++) {
      isSeen ||= strip.timeS[row * columns + column] > 0;
      if (wasCongested(strip, row, column, memory, goSpeedMs)) positions[congested++] = bottomM + (row + 0.5) * cellM;
    }
    if (!isSeen) continue;
    const reachM = columnReach(positions, congested, headM, gapM);
    out[column] = 0;
    for (let k = 0; k < congested && positions[k] <= reachM; k++) {
      const row = Math.floor((positions[k] - bottomM) / cellM);
      // What was congested a moment ago only ties the column together; its end is where it stands now.
      if (wasCongested(strip, row, column, 0, goSpeedMs)) out[column] = positions[k];
    }
  }
  return out;
}

function wasCongested(strip: Strip, row: number, column: number, memory: number, goSpeedMs: number): boolean {
  for (let c = Math.max(0, column - memory); c <= column; c++) {
    const cell = row * strip.spec.columns + c;
    if (strip.timeS[cell] > 0 && strip.distanceM[cell] < goSpeedMs * strip.timeS[cell]) return true;
  }
  return false;
}

/** Share of the columns seen in which the congested cells reach `spillShare` of the storage; NaN where it cannot be said. */
export function spillShareOfCells(strip: Strip, storageM: number, options: Partial<QueueOptions> = {}): number {
  const full = (options.spillShare ?? DEFAULT_QUEUE_OPTIONS.spillShare) * storageM;
  const seen = congestedReaches(strip, options).filter((reach) => !Number.isNaN(reach));
  return full > 0 && seen.length > 0 ? seen.filter((reach) => reach >= full).length / seen.length : NaN;
}
