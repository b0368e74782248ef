import { mkdir, writeFile } from "node:fs/promises";
import path from "node:path";
import { WINDOWS, type Window } from "./demand/pattern";
import type { CityScale } from "./network/build-city";
import { junctionsCsv } from "./output/junctions-file";
import { createPingWriter } from "./output/ping-writer";
import { createGeometry } from "./probes/positions";
import { createScenario } from "./scenario";
import { simulateWindow, type DayPlan } from "./simulate-window";

export interface GenerateCityOptions {
  outDir: string;
  onProgress?: (share: number, what: string) => void;
  /** `small` is a part of the city with about thirty junctions, two days and two windows: for tests. */
  scale?: CityScale;
}

export interface GeneratedCity {
  junctionsFile: string;
  pingFiles: string[];
  pings: number;
}

const DAYS: Record<CityScale, DayPlan[]> = {
  demo: [
    { date: "2026-03-02", kind: "weekday", factor: 0.96 },
    { date: "2026-03-03", kind: "weekday", factor: 0.99 },
    { date: "2026-03-04", kind: "weekday", factor: 1 },
    { date: "2026-03-05", kind: "weekday", factor: 1.02 },
    { date: "2026-03-06", kind: "weekday", factor: 1.03 },
    { date: "2026-03-07", kind: "saturday", factor: 0.9 },
  ],
  small: [
    { date: "2026-03-03", kind: "weekday", factor: 0.99 },
    { date: "2026-03-04", kind: "weekday", factor: 1.01 },
  ],
};

const SMALL_WINDOWS: Window[] = [
  { period: "am", startMin: 435, endMin: 495 },
  { period: "pm", startMin: 975, endMin: 1065 },
];

/** Simulates Varnmouth and writes its junctions and one file of pings for each day. Same bytes every time. */
export async function generateCity(options: GenerateCityOptions): Promise<GeneratedCity> {
  const scale = options.scale ?? "demo";
  const say = options.onProgress ?? (() => undefined);
  const windows = scale === "small" ? SMALL_WINDOWS : WINDOWS;
  await mkdir(options.outDir, { recursive: true });
  say(0, "laying out the streets");
  const scenario = createScenario(scale);
  const geometry = createGeometry(scenario.city, scenario.map);
  const junctionsFile = path.join(options.outDir, "junctions.csv");
  await writeFile(junctionsFile, junctionsCsv(scenario.city, scenario.plans.pm));
  const pingFiles: string[] = [];
  const runs = DAYS[scale].length * windows.length;
  let done = 0;
  let pings = 0;
  for (const day of DAYS[scale]) {
    const file = path.join(options.outDir, `pings-${day.date}.csv.gz`);
    const writer = createPingWriter(file);
    for (const window of windows) {
      say((done + 0.3) / (runs + 0.5), `simulating ${day.date}, ${clockOf(window.startMin)} to ${clockOf(window.endMin)}`);
      simulateWindow(scenario, day, window, writer, geometry);
      done++;
      // Gives the compressor, which runs beside, its turn.
      await new Promise((resolve) => setImmediate(resolve));
    }
    await writer.close();
    pings += writer.rows();
    pingFiles.push(file);
  }
  say(1, `${pings} pings written`);
  return { junctionsFile, pingFiles, pings };
}

function clockOf(minutes: number): string {
  return `${String(Math.floor(minutes / 60)).padStart(2, "0")}:${String(minutes % 60).padStart(2, "0")}`;
}
