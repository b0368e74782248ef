import type { PingColumns } from "@/core/types";

/** Pings of vehicle v are order[offsets[v]] to order[offsets[v + 1] - 1], oldest first. */
export interface VehicleIndex {
  vehicles: number;
  offsets: Uint32Array;
  order: Uint32Array;
}

/**
 * Counting sort by vehicle, then by time within each vehicle; pings of one instant by position, so that the
 * order of the rows does not matter. O(pings + vehicles) for a batch that is already in time order.
 */
export function groupByVehicle(pings: PingColumns): VehicleIndex {
  let vehicles = 0;
  for (let i = 0; i < pings.length; i++) if (pings.vehicle[i] >= vehicles) vehicles = pings.vehicle[i] + 1;
  const offsets = new Uint32Array(vehicles + 1);
  for (let i = 0; i < pings.length; i++) offsets[pings.vehicle[i] + 1] += 1;
  for (let v = 0; v < vehicles; v++) offsets[v + 1] += offsets[v];

  const next = offsets.slice(0, vehicles);
  const order = new Uint32Array(pings.length);
  for (let i = 0; i < pings.length; i++) order[next[pings.vehicle[i]]++] = i;
  for (let v = 0; v < vehicles; v++) sortByTime(pings, order, offsets[v], offsets[v + 1]);
  return { vehicles, offsets, order };
}

function sortByTime(pings: PingColumns, order: Uint32Array, from: number, to: number): void {
  const { tMs } = pings;
  let sorted = true;
  for (let k = from + 1; k < to && sorted; k++) sorted = tMs[order[k - 1]] < tMs[order[k]];
  if (!sorted) order.subarray(from, to).sort((a, b) => comparePings(pings, a, b));
}

function comparePings(pings: PingColumns, a: number, b: number): number {
  return (
    pings.tMs[a] - pings.tMs[b] ||
    pings.lat[a] - pings.lat[b] ||
    pings.lon[a] - pings.lon[b] ||
    compareMissing(pings.speedMs[a], pings.speedMs[b]) ||
    compareMissing(pings.headingDeg[a], pings.headingDeg[b])
  );
}

/** Present values first, so that the fuller of two pings of one instant is kept. */
function compareMissing(a: number, b: number): number {
  if (Number.isNaN(a)) return Number.isNaN(b) ? 0 : 1;
  return Number.isNaN(b) ? -1 : a - b;
}
