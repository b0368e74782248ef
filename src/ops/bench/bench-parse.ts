import { createReadStream } from "node:fs";
import { join } from "node:path";
import type { FileMapping } from "@/domain/upload";
import { readPings } from "@/formats/pings/read-pings";
import { VehicleNames } from "@/formats/vehicle-names";
import { figure, secondsSince, type Figure } from "./figures";
import { writePings } from "./traffic";

export const PING_START_MS = Date.parse("2026-03-02T06:00:00Z");

const MAPPING: FileMapping = {
  format: "csv",
  delimiter: ",",
  decimal: ".",
  hasHeader: true,
  columns: { vehicle_id: 0, timestamp: 1, lat: 2, lon: 3, speed: 4, heading: 5 },
  timeFormat: "epoch_ms",
  timeZone: "UTC",
  speedUnit: "kmh",
};

/** Rows read in a second, beside reading the file's bytes alone; of two passes the second, as in the middle of a long file. */
export async function benchParse(folder: string, rows: number): Promise<Figure[]> {
  const path = join(folder, "parse.csv");
  await writePings(path, rows, 1, PING_START_MS);
  await bareRead(path);
  const bareS = await bareRead(path);
  await parseAll(path, rows);
  const parseS = await parseAll(path, rows);
  return [figure("parse a file of pings", rows / parseS / 1e6, "M rows/s", "bare read of the file", rows / bareS / 1e6)];
}

async function parseAll(path: string, rows: number): Promise<number> {
  const startMs = performance.now();
  const counts = await readPings(createReadStream(path), MAPPING, { onBatch: () => undefined }, new VehicleNames());
  if (counts.accepted !== rows) throw new Error(`Of ${rows} generated rows ${counts.accepted} were accepted.`);
  return secondsSince(startMs);
}

async function bareRead(path: string): Promise<number> {
  const startMs = performance.now();
  let bytes = 0;
  for await (const chunk of createReadStream(path)) bytes += (chunk as Buffer).length;
  if (bytes === 0) throw new Error(`${path} is empty.`);
  return secondsSince(startMs);
}
