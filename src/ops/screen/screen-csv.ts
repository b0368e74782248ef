import type { ScreenRow } from "@/core/scores/screen-rows";
import type { Network } from "@/core/types";
import type { Cell } from "@/formats/csv/write-csv";

export const SCREEN_HEADER = [
  "junction_id",
  "approach_bearing_deg",
  "turn",
  "interval_start",
  "vehicles",
  "mean_delay_s",
  "p95_delay_s",
  "stop_share",
  "stops_per_vehicle",
  "queue_reach_m",
  "spillback_share",
] as const;

/** One row of the file; what the sample cannot say is NaN and becomes an empty cell. */
export function screenCells(row: ScreenRow, network: Network): Cell[] {
  return [
    network.junctions[row.junction].id,
    rounded(row.approachBearingDeg, 1) % 360,
    row.turn,
    row.startMs === null ? "all" : new Date(row.startMs).toISOString().replace(".000Z", "Z"),
    row.vehicles,
    rounded(row.meanDelayS, 2),
    rounded(row.p95DelayS, 2),
    rounded(row.stopShare, 4),
    rounded(row.stopsPerVehicle, 4),
    rounded(row.queueReachM, 1),
    rounded(row.spillbackShare, 4),
  ];
}

function rounded(value: number, decimals: number): number {
  const scale = 10 ** decimals;
  // Adding 0 turns -0 into 0.
  return Math.round(value * scale) / scale + 0;
}
