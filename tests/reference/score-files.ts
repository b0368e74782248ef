/**
 * Scores output files against the working files that build.ts wrote:
 *   npx tsx tests/reference/score-files.ts FOLDER SHARE INTERVAL SCREEN.csv [TRAVERSALS.csv]
 */
import { readFileSync } from "node:fs";
import { join } from "node:path";

import type { Turn } from "@/core/types";

import { isSampled } from "./sampling";
import { scoreScreen } from "./score";
import type { Passage, Truth } from "./truth/types";

function readRows(path: string): Record<string, string>[] {
  const [head, ...lines] = readFileSync(path, "utf8").trim().split(/\r?\n/);
  const names = head.split(",");
  return lines.map((line) => Object.fromEntries(line.split(",").map((cell, i) => [names[i], cell])));
}

const numberOf = (cell: string | undefined) => (cell ? Number(cell) : Number.NaN);

const [folder, share, interval, screenPath, traversalsPath] = process.argv.slice(2);
if (!screenPath) throw new Error("Usage: score-files.ts FOLDER SHARE INTERVAL SCREEN.csv [TRAVERSALS.csv]");
const truth: Truth = JSON.parse(readFileSync(join(folder, "truth.json"), "utf8"));
const oracle: Truth = JSON.parse(readFileSync(join(folder, `oracle-${share}.json`), "utf8"));
const passages: Passage[] = readRows(join(folder, "passages.csv"))
  .map((row) => ({
    vehicleId: row.vehicle_id,
    junctionId: row.junction_id,
    approachBearingDeg: Number(row.approach_bearing_deg),
    turn: row.turn as Turn,
    enterMs: Number(row.enter_ms),
    stopLineMs: Number(row.stop_line_ms),
    exitMs: Number(row.exit_ms),
    delayS: row.delay_s ? Number(row.delay_s) : null,
    stops: Number(row.stops),
    isComplete: row.is_complete === "1",
  }))
  .filter((passage) => isSampled(truth.scenario, passage.vehicleId, Number(share) / 100));
const pingTimes = new Map<string, number[]>();
for (const row of readRows(join(folder, `pings-${share}-${interval}.csv`))) {
  const times = pingTimes.get(row.vehicle_id);
  if (times) times.push(Number(row.timestamp));
  else pingTimes.set(row.vehicle_id, [Number(row.timestamp)]);
}
const rows = readRows(screenPath).map((row) => ({
  junctionId: row.junction_id,
  approachBearingDeg: Number(row.approach_bearing_deg),
  turn: row.turn as Turn,
  intervalStart: row.interval_start,
  vehicles: Number(row.vehicles),
  meanDelayS: numberOf(row.mean_delay_s),
  stopShare: numberOf(row.stop_share),
  queueReachM: numberOf(row.queue_reach_m),
  spillbackShare: numberOf(row.spillback_share),
}));
const traversals =
  traversalsPath === undefined
    ? undefined
    : readRows(traversalsPath).map((row) => ({
        vehicleId: row.vehicle_id,
        junctionId: row.junction_id,
        approachBearingDeg: Number(row.approach_bearing_deg),
        turn: row.turn as Turn,
        stopLineMs: Number(row.stop_line_ms),
      }));
console.log(scoreScreen({ truth, oracle, passages, pingTimes, intervalS: Number(interval), rows, traversals }));
