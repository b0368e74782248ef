const ZERO = 48;

let lastKey = 0;
let lastDayMs = 0;

/** Midnight of a date read as if in UTC; NaN for a date that no calendar has. */
export function dayStartMs(year: number, month: number, day: number): number {
  const key = year * 10_000 + month * 100 + day;
  if (key === lastKey) return lastDayMs;
  if (!(year >= 1000 && month >= 1 && month <= 12 && day >= 1)) return NaN;
  const dayMs = Date.UTC(year, month - 1, day);
  // Date.UTC rolls 31 April over into May.
  if (new Date(dayMs).getUTCDate() !== day) return NaN;
  lastKey = key;
  lastDayMs = dayMs;
  return dayMs;
}

export function isDigit(byte: number): boolean {
  return byte >= ZERO && byte <= 57;
}

export function two(bytes: Uint8Array, at: number): number {
  const tens = bytes[at];
  const ones = bytes[at + 1];
  return isDigit(tens) && isDigit(ones) ? (tens - ZERO) * 10 + (ones - ZERO) : NaN;
}

export function four(bytes: Uint8Array, at: number): number {
  return two(bytes, at) * 100 + two(bytes, at + 2);
}

export function digitsEnd(bytes: Uint8Array, start: number, end: number): number {
  let at = start;
  while (at < end && isDigit(bytes[at])) at += 1;
  return at;
}

/** Rounded to whole milliseconds. */
export function fractionMs(bytes: Uint8Array, start: number, end: number): number {
  let value = 0;
  let scale = 1000;
  for (let at = start; at < end && at < start + 9; at += 1) {
    scale /= 10;
    value += (bytes[at] - ZERO) * scale;
  }
  return Math.round(value);
}
