/** Powers of ten that are exact, 1 to 1e22. */
export const POWERS = Float64Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));
const decoder = new TextDecoder("latin1");
const MINUS = 45;
const PLUS = 43;
const ZERO = 48;

/**
 * The decimal number in bytes start to end, NaN if it is none; no spaces, no thousands separators.
 * Exact: a mantissa below 2^53 divided by a power of ten up to 1e22 is rounded once (Clinger 1990);
 * everything else goes through Number.
 */
export function parseNumber(bytes: Uint8Array, start: number, end: number, decimal: number): number {
  let at = start;
  let negative = false;
  if (at < end && (bytes[at] === MINUS || bytes[at] === PLUS)) {
    negative = bytes[at] === MINUS;
    at += 1;
  }
  let mantissa = 0;
  let digits = 0;
  let decimals = -1;
  for (; at < end; at += 1) {
    const digit = bytes[at] - ZERO;
    if (digit >= 0 && digit <= 9) {
      mantissa = mantissa * 10 + digit;
      digits += 1;
      if (decimals >= 0) decimals += 1;
    } else if (bytes[at] === decimal && decimals < 0) {
      decimals = 0;
    } else {
      return parseSlowly(bytes, start, end, decimal);
    }
  }
  if (digits === 0) return NaN;
  if (mantissa > Number.MAX_SAFE_INTEGER || decimals > 22) return parseSlowly(bytes, start, end, decimal);
  const value = decimals > 0 ? mantissa / POWERS[decimals] : mantissa;
  return negative ? -value : value;
}

const DECIMAL_NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,3})?$/i;

function parseSlowly(bytes: Uint8Array, start: number, end: number, decimal: number): number {
  const text = decoder.decode(bytes.subarray(start, end)).replace(String.fromCharCode(decimal), ".");
  return DECIMAL_NUMBER.test(text) ? Number(text) : NaN;
}
