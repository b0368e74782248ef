import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";

import { createPlane } from "./plane";
import { toSampledCourses } from "./recording";
import type { RecordedTruth } from "./recording";
import { OPEN_SKY, PING_HEADER, isSampled, pingLine, samplePings } from "./sampling";
import type { NoiseOptions } from "./sampling";
import type { Measured } from "./truth/measure-truth";

const SAMPLINGS: [share: number, intervalS: number][] = [[1, 5], [0.2, 1], [0.2, 5], [0.1, 15], [0.05, 30], [0.02, 10]];

/** Plain files of one scenario, for work on the core: junctions, pings, truth, oracle and the sampled vehicles' passages. */
export function writeWorkingFiles(measured: Measured, recorded: RecordedTruth, root: string) {
  const folder = join(root, measured.scenario.id);
  mkdirSync(folder, { recursive: true });
  const junctions = recorded.truth.junctions.map(({ id, name, lat, lon }) => `${id},${name},${lat},${lon}`);
  writeFileSync(join(folder, "junctions.csv"), `junction_id,name,lat,lon\n${junctions.join("\n")}\n`);
  for (const [share, intervalS] of SAMPLINGS) {
    writeFileSync(join(folder, `pings-${share * 100}-${intervalS}.csv`), pingFile(measured, share, intervalS, OPEN_SKY));
  }
  writeFileSync(join(folder, "truth.json"), JSON.stringify(recorded.truth, null, 1));
  for (const [share, oracle] of Object.entries(recorded.oracle)) {
    writeFileSync(join(folder, `oracle-${share}.json`), JSON.stringify(oracle));
  }
  const sampled = recorded.passages.filter((p) => isSampled(measured.scenario.id, p.vehicleId, 0.2));
  const passages = sampled.map(
    (p) =>
      `${p.vehicleId},${p.junctionId},${p.approachBearingDeg},${p.turn},${p.enterMs},${p.stopLineMs},${p.exitMs},${p.delayS ?? ""},${p.stops},${p.isComplete ? 1 : 0}`,
  );
  const header = "vehicle_id,junction_id,approach_bearing_deg,turn,enter_ms,stop_line_ms,exit_ms,delay_s,stops,is_complete";
  writeFileSync(join(folder, "passages.csv"), `${header}\n${passages.join("\n")}\n`);
}

function pingFile(measured: Measured, share: number, intervalS: number, noise: NoiseOptions): string {
  const { scenario } = measured;
  const plane = createPlane(scenario.lat, scenario.lon);
  const lines = [PING_HEADER];
  for (const course of measured.courses.values()) {
    if (!isSampled(scenario.id, course.id, share)) continue;
    for (const part of toSampledCourses(course)) {
      for (const ping of samplePings(part, scenario.id, intervalS, noise, measured.startMs, plane)) lines.push(pingLine(ping));
    }
  }
  return `${lines.join("\n")}\n`;
}
