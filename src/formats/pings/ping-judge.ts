import type { FileMapping, RejectReason, SpeedUnit } from "@/domain/upload";
import { byteOf, isPosition, optionalNumber } from "../fields";
import { parseNumber } from "../csv/parse-number";
import { isPlausibleTime, timeParser, type TimeParser } from "../time/parse-time";

/** Metres per second in one unit; the mile has 1,609.344 m, the nautical mile 1,852 m. */
const MS_PER_UNIT: Record<SpeedUnit, number> = { kmh: 1 / 3.6, mph: 0.44704, ms: 1, kn: 1852 / 3600 };
const MAX_NAME_BYTES = 200;

/** Fields of one row as spans of bytes: field f is spans[2 f] to spans[2 f + 1]. */
export const FIELD = { vehicle: 0, time: 1, lat: 2, lon: 3, speed: 4, heading: 5 } as const;

/** Reads the fields of one row after another; after `judge` returns null the numbers hold a good ping. */
export class PingJudge {
  readonly spans = new Int32Array(12);
  tMs = NaN;
  lat = NaN;
  lon = NaN;
  speedMs = NaN;
  headingDeg = NaN;
  private readonly parseTime: TimeParser;
  private readonly decimal: number;
  private readonly msPerUnit: number;

  constructor(mapping: FileMapping) {
    // Numbers in JSON have a point, whatever the mapping says.
    this.decimal = byteOf(mapping.format === "csv" ? mapping.decimal : ".");
    this.parseTime = timeParser(mapping.timeFormat, mapping.timeZone, this.decimal);
    this.msPerUnit = MS_PER_UNIT[mapping.speedUnit];
  }

  judge(bytes: Uint8Array): RejectReason | null {
    const { spans, decimal } = this;
    const nameBytes = spans[1] - spans[0];
    if (nameBytes <= 0 || nameBytes > MAX_NAME_BYTES) return "vehicle";
    const tMs = this.parseTime(bytes, spans[2], spans[3]);
    if (tMs !== tMs) return "time";
    const lat = parseNumber(bytes, spans[4], spans[5], decimal);
    const lon = parseNumber(bytes, spans[6], spans[7], decimal);
    if (!isPosition(lat, lon)) return "position";
    const speed = optionalNumber(bytes, spans[8], spans[9], decimal);
    if (speed < 0 || speed === Infinity) return "speed";
    return this.take(nameBytes, tMs, lat, lon, speed, optionalNumber(bytes, spans[10], spans[11], decimal));
  }

  /** A time of the mapping's format in ms UTC; NaN for anything else. */
  timeOf(bytes: Uint8Array, start: number, end: number): number {
    return this.parseTime(bytes, start, end);
  }

  /** Judges values that are read: `tMs` in ms UTC, speed in the mapping's unit. */
  take(nameBytes: number, tMs: number, lat: number, lon: number, speed: number, heading: number): RejectReason | null {
    if (nameBytes <= 0 || nameBytes > MAX_NAME_BYTES) return "vehicle";
    if (!isPlausibleTime(tMs)) return "time";
    if (!isPosition(lat, lon)) return "position";
    if (speed < 0 || speed === Infinity) return "speed";
    if (heading < -180 || heading > 360) return "heading";
    this.tMs = tMs;
    this.lat = lat;
    this.lon = lon;
    this.speedMs = speed * this.msPerUnit;
    this.headingDeg = heading < 0 ? heading + 360 : heading === 360 ? 0 : heading;
    return null;
  }
}
