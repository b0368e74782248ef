import { createWriteStream } from "node:fs";
import { finished } from "node:stream/promises";
import { createGzip } from "node:zlib";

export const PING_HEADER = "vehicle_id,timestamp,lat,lon,speed_kmh,heading\n";
const CHUNK = 1 << 18;
const LONGEST_ROW = 128;

/** Writes rows of pings as gzipped CSV, byte by byte: string building would cost most of the seeding time. */
export interface PingWriter {
  /** Speed in tenths of km/h; heading in whole degrees, -1 where the fleet gives none. */
  write(vehicle: Uint8Array, tMs: number, lat: number, lon: number, speedTenths: number, headingDeg: number): void;
  rows(): number;
  close(): Promise<void>;
}

export function createPingWriter(file: string): PingWriter {
  const gzip = createGzip({ level: 2 });
  const sink = createWriteStream(file);
  gzip.pipe(sink);
  let buffer = Buffer.allocUnsafe(CHUNK);
  let at = buffer.write(PING_HEADER, 0, "ascii");
  let rows = 0;
  let dayMs = NaN;
  let dayText = "";

  function flush(): void {
    gzip.write(buffer.subarray(0, at));
    buffer = Buffer.allocUnsafe(CHUNK);
    at = 0;
  }

  function digits(value: number, count: number): void {
    for (let i = count - 1; i >= 0; i--) {
      buffer[at + i] = 48 + (value % 10);
      value = Math.floor(value / 10);
    }
    at += count;
  }

  function whole(value: number): void {
    digits(value, value < 10 ? 1 : value < 100 ? 2 : value < 1000 ? 3 : String(value).length);
  }

  function degrees(value: number): void {
    let micro = Math.round(value * 1e6);
    if (micro < 0) {
      buffer[at++] = 45;
      micro = -micro;
    }
    whole(Math.floor(micro / 1e6));
    buffer[at++] = 46;
    digits(micro % 1e6, 6);
    buffer[at++] = 44;
  }

  /** ISO 8601 in UTC with whole seconds. */
  function time(tMs: number): void {
    const startMs = Math.floor(tMs / 86_400_000) * 86_400_000;
    if (startMs !== dayMs) {
      dayMs = startMs;
      dayText = new Date(startMs).toISOString().slice(0, 11);
    }
    at += buffer.write(dayText, at, "ascii");
    const second = Math.floor((tMs - startMs) / 1000);
    digits(Math.floor(second / 3600), 2);
    buffer[at++] = 58;
    digits(Math.floor(second / 60) % 60, 2);
    buffer[at++] = 58;
    digits(second % 60, 2);
    buffer[at++] = 90;
    buffer[at++] = 44;
  }

  return {
    write(vehicle, tMs, lat, lon, speedTenths, headingDeg) {
      if (at + LONGEST_ROW > CHUNK) flush();
      for (let i = 0; i < vehicle.length; i++) buffer[at++] = vehicle[i];
      buffer[at++] = 44;
      time(tMs);
      degrees(lat);
      degrees(lon);
      whole(Math.floor(speedTenths / 10));
      buffer[at++] = 46;
      buffer[at++] = 48 + (speedTenths % 10);
      buffer[at++] = 44;
      if (headingDeg >= 0) whole(headingDeg);
      buffer[at++] = 10;
      rows++;
    },
    rows: () => rows,
    async close() {
      flush();
      gzip.end();
      await finished(sink);
    },
  };
}
