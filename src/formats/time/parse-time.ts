import type { TimeFormat } from "@/domain/upload";
import { parseNumber } from "../csv/parse-number";
import { dayStartMs, digitsEnd, four, fractionMs, isDigit, two } from "./calendar-bytes";
import { slashedWallMs } from "./slashed-time";
import { ZoneClock } from "./zone-clock";

/** Outside these years a time is taken for a mistake: 1990-01-01 and 2100-01-01. */
const EARLIEST_MS = 631_152_000_000;
const LATEST_MS = 4_102_444_800_000;

export type TimeParser = (bytes: Uint8Array, start: number, end: number) => number;

/** Reads times of one format into whole ms UTC; NaN for what is no time of that format. */
export function timeParser(format: TimeFormat, timeZone: string, decimal: number): TimeParser {
  switch (format) {
    case "epoch_s":
      return (bytes, start, end) => plausible(Math.round(parseNumber(bytes, start, end, decimal) * 1000));
    case "epoch_ms":
      return (bytes, start, end) => plausible(Math.round(parseNumber(bytes, start, end, decimal)));
    case "iso":
      return (bytes, start, end) => plausible(parseCalendar(bytes, start, end, null));
    case "local": {
      const clock = new ZoneClock(timeZone);
      return (bytes, start, end) => plausible(parseCalendar(bytes, start, end, clock));
    }
    case "local_mdy":
    case "local_dmy": {
      const clock = new ZoneClock(timeZone);
      return (bytes, start, end) => plausible(clock.instantMs(slashedWallMs(bytes, start, end, format === "local_mdy")));
    }
    default:
      return format satisfies never;
  }
}

/** Whether an instant in ms UTC is one at which a vehicle may have been seen; false for NaN. */
export function isPlausibleTime(tMs: number): boolean {
  return tMs >= EARLIEST_MS && tMs < LATEST_MS;
}

function plausible(tMs: number): number {
  return isPlausibleTime(tMs) ? tMs : NaN;
}

/**
 * `YYYY-MM-DD` or `YYYY/MM/DD` or `DD.MM.YYYY` or `YYYYMMDD`, then T or a space, then `HH:MM`, seconds and
 * their fraction as far as given, then Z, UTC or an offset. Without a zone the clock decides; NaN if there is none.
 */
function parseCalendar(bytes: Uint8Array, start: number, end: number, clock: ZoneClock | null): number {
  if (end - start < 13) return NaN;
  let at = start + 10;
  let dayMs: number;
  const separator = bytes[start + 4];
  if (separator === 45 || separator === 47) {
    if (bytes[start + 7] !== separator) return NaN;
    dayMs = dayStartMs(four(bytes, start), two(bytes, start + 5), two(bytes, start + 8));
  } else if (bytes[start + 2] === 46 && bytes[start + 5] === 46) {
    dayMs = dayStartMs(four(bytes, start + 6), two(bytes, start + 3), two(bytes, start));
  } else {
    dayMs = dayStartMs(four(bytes, start), two(bytes, start + 4), two(bytes, start + 6));
    at = start + 8;
  }
  const mark = bytes[at];
  if (mark !== 84 && mark !== 116 && mark !== 32) return NaN;
  at += 1;
  const colon = bytes[at + 2] === 58 ? 1 : 0;
  const hour = two(bytes, at);
  const minute = two(bytes, at + 2 + colon);
  at += 4 + colon;
  let secondMs = 0;
  if (at < end && (colon === 1 ? bytes[at] === 58 : isDigit(bytes[at]))) {
    const second = two(bytes, at + colon);
    // 60 is a leap second.
    if (!(second <= 60)) return NaN;
    secondMs = second * 1000;
    at += 2 + colon;
    if (at < end && (bytes[at] === 46 || bytes[at] === 44)) {
      const fractionEnd = digitsEnd(bytes, at + 1, end);
      if (fractionEnd === at + 1) return NaN;
      secondMs += fractionMs(bytes, at + 1, fractionEnd);
      at = fractionEnd;
    }
  }
  if (at > end || !(hour <= 23) || !(minute <= 59)) return NaN;
  const wallMs = dayMs + hour * 3_600_000 + minute * 60_000 + secondMs;
  if (at === end) return clock === null ? NaN : clock.instantMs(wallMs);
  return wallMs - zoneMs(bytes, at, end);
}

/** Offset written after the time, in ms; NaN if it is none. */
function zoneMs(bytes: Uint8Array, start: number, end: number): number {
  const at = bytes[start] === 32 ? start + 1 : start;
  const sign = bytes[at];
  if (end - at === 1) return sign === 90 || sign === 122 ? 0 : NaN;
  if (sign === 85) return end - at === 3 && bytes[at + 1] === 84 && bytes[at + 2] === 67 ? 0 : NaN;
  if (sign !== 43 && sign !== 45) return NaN;
  const hours = two(bytes, at + 1);
  let minutes = 0;
  if (end - at > 3) {
    const colon = bytes[at + 3] === 58 ? 1 : 0;
    if (end - at !== 5 + colon) return NaN;
    minutes = two(bytes, at + 3 + colon);
  } else if (end - at !== 3) {
    return NaN;
  }
  if (!(hours <= 14) || !(minutes <= 59)) return NaN;
  return (sign === 45 ? -1 : 1) * (hours * 3_600_000 + minutes * 60_000);
}
