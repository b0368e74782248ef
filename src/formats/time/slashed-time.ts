import { dayStartMs, digitsEnd, four, fractionMs, two } from "./calendar-bytes";

const SLASH = 47;
const COLON = 58;
const SPACE = 32;

/**
 * Wall clock, as if in UTC, of `MM/DD/YYYY HH:MM[:SS[.fff]]` or, day first, `DD/MM/YYYY …`, with AM or PM behind it or
 * by 24 hours; day, month and hour may have one digit. NaN for anything else.
 */
export function slashedWallMs(bytes: Uint8Array, start: number, end: number, isMonthFirst: boolean): number {
  const firstEnd = digitsEnd(bytes, start, end);
  const secondEnd = digitsEnd(bytes, firstEnd + 1, end);
  if (bytes[firstEnd] !== SLASH || bytes[secondEnd] !== SLASH || bytes[secondEnd + 5] !== SPACE) return NaN;
  const first = oneOrTwo(bytes, start, firstEnd);
  const second = oneOrTwo(bytes, firstEnd + 1, secondEnd);
  const year = four(bytes, secondEnd + 1);
  const dayMs = isMonthFirst ? dayStartMs(year, first, second) : dayStartMs(year, second, first);
  return dayMs + clockMs(bytes, secondEnd + 6, end);
}

function clockMs(bytes: Uint8Array, start: number, end: number): number {
  const half = halfOfDay(bytes, end);
  let stop = end;
  if (half !== null) {
    stop -= 2;
    if (bytes[stop - 1] === SPACE) stop -= 1;
  }
  const hourEnd = digitsEnd(bytes, start, stop);
  const minute = two(bytes, hourEnd + 1);
  let at = hourEnd + 3;
  if (bytes[hourEnd] !== COLON || !(minute <= 59) || at > stop) return NaN;
  let secondMs = 0;
  if (at < stop) {
    const second = two(bytes, at + 1);
    // 60 is a leap second.
    if (bytes[at] !== COLON || !(second <= 60) || at + 3 > stop) return NaN;
    secondMs = second * 1000;
    at += 3;
    if (at < stop) {
      if (bytes[at] !== 46 || digitsEnd(bytes, at + 1, stop) !== stop || at + 1 === stop) return NaN;
      secondMs += fractionMs(bytes, at + 1, stop);
    }
  }
  return hourOfDay(oneOrTwo(bytes, start, hourEnd), half) * 3_600_000 + minute * 60_000 + secondMs;
}

type Half = "am" | "pm" | null;

function halfOfDay(bytes: Uint8Array, end: number): Half {
  // Bit 32 makes a letter small.
  if ((bytes[end - 1] | 32) !== 109) return null;
  const letter = bytes[end - 2] | 32;
  return letter === 97 ? "am" : letter === 112 ? "pm" : null;
}

/** 12 AM is midnight, 12 PM noon. */
function hourOfDay(hour: number, half: Half): number {
  if (half === null) return hour <= 23 ? hour : NaN;
  if (!(hour >= 1 && hour <= 12)) return NaN;
  return (hour % 12) + (half === "pm" ? 12 : 0);
}

function oneOrTwo(bytes: Uint8Array, start: number, end: number): number {
  if (end - start === 1) return bytes[start] - 48;
  return end - start === 2 ? two(bytes, start) : NaN;
}
