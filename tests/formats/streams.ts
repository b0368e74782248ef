import { readFileSync } from "node:fs";
import type { PingColumns } from "@/core/types";
import type { FileMapping, RejectedRow } from "@/domain/upload";
import { readPings } from "@/formats/pings/read-pings";
import { VehicleNames } from "@/formats/vehicle-names";

export const PING_MAPPING: FileMapping = {
  format: "csv",
  delimiter: ",",
  decimal: ".",
  hasHeader: true,
  columns: { vehicle_id: 0, timestamp: 1, lat: 2, lon: 3, speed: 4, heading: 5 },
  timeFormat: "iso",
  timeZone: "UTC",
  speedUnit: "kmh",
};

export function fixture(name: string): Uint8Array {
  return readFileSync(new URL(`./fixtures/${name}`, import.meta.url));
}

/** The bytes cut at the given places. */
export async function* cut(bytes: Uint8Array, places: readonly number[] = []): AsyncGenerator<Uint8Array> {
  const sorted = [...places].sort((a, b) => a - b);
  let from = 0;
  for (const place of [...sorted, bytes.length]) {
    yield bytes.subarray(from, place);
    from = Math.max(from, place);
  }
}

export interface Ping {
  vehicle: string;
  time: string;
  lat: number;
  lon: number;
  speedMs: number;
  headingDeg: number;
}

export async function pingsOf(chunks: AsyncIterable<Uint8Array>, mapping: FileMapping = PING_MAPPING, batchRows = 4) {
  const names = new VehicleNames();
  const batches: PingColumns[] = [];
  const rejects: RejectedRow[] = [];
  const sink = { onBatch: (batch: PingColumns) => void batches.push(batch), onReject: (row: RejectedRow) => void rejects.push(row) };
  const counts = await readPings(chunks, mapping, sink, names, { batchRows });
  const pings = batches.flatMap((batch) => Array.from({ length: batch.length }, (_, i) => pingAt(batch, i, names)));
  return { counts, pings, rejects, batchSizes: batches.map((batch) => batch.length), vehicles: names.size };
}

function pingAt(batch: PingColumns, i: number, names: VehicleNames): Ping {
  return {
    vehicle: names.nameOf(batch.vehicle[i]),
    time: new Date(batch.tMs[i]).toISOString(),
    lat: batch.lat[i],
    lon: batch.lon[i],
    speedMs: batch.speedMs[i],
    headingDeg: batch.headingDeg[i],
  };
}
