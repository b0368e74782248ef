/** Points of a track in seconds and metres; NaN is not allowed, time never falls. */
export interface Track {
  /** Seconds after the track's own zero. */
  t: Float32Array;
  /** Distance to the stop line, metres. */
  s: Float32Array;
}

const VERSION = 1;
const STEPS_PER_UNIT = 10;
/** Longest variable-length integer that is written: five groups of seven bits. */
const MAX_VARINT_BYTES = 5;
const MAX_STEPS = 2 ** 30;

/**
 * Packs a track into bytes: version, number of points, then for every point the change of time and of
 * distance in tenths of a second and of a metre, as variable-length integers (one byte up to 12.7 s
 * and 6.3 m; longer steps take more bytes). Rounding does not add up along the track.
 * Throws RangeError for lengths that differ, for NaN, for time that runs backwards and for values
 * beyond 100,000 km or three years. O(points).
 */
export function encodeTrack(t: Float32Array, s: Float32Array): Uint8Array<ArrayBuffer> {
  if (t.length !== s.length) throw new RangeError(`A track needs as many times as distances, got ${t.length} and ${s.length}.`);
  const out = new Uint8Array(1 + MAX_VARINT_BYTES * (1 + 2 * t.length));
  out[0] = VERSION;
  let at = writeVarint(out, 1, t.length);
  let lastT = 0;
  let lastS = 0;
  for (let i = 0; i < t.length; i++) {
    const tSteps = toSteps(t[i], i);
    const sSteps = toSteps(s[i], i);
    if (i > 0 && tSteps < lastT) throw new RangeError(`Time runs backwards at point ${i} of a track.`);
    at = writeVarint(out, at, i === 0 ? zigzag(tSteps) : tSteps - lastT);
    at = writeVarint(out, at, zigzag(sSteps - lastS));
    lastT = tSteps;
    lastS = sSteps;
  }
  return out.slice(0, at);
}

/** Number of points of an encoded track, without decoding it. Throws TypeError for foreign bytes. */
export function trackLength(bytes: Uint8Array): number {
  if (bytes.length < 2) throw new TypeError("Not a track: too few bytes.");
  if (bytes[0] !== VERSION) throw new TypeError(`Track version ${bytes[0]}, expected ${VERSION}.`);
  const cursor: Cursor = { bytes, at: 1 };
  return readVarint(cursor);
}

/**
 * Unpacks a track to 0.1 s and 0.1 m. Throws TypeError when the bytes are of another version, end
 * too early or go on too long. O(points).
 */
export function decodeTrack(bytes: Uint8Array): Track {
  const length = trackLength(bytes);
  if (length > bytes.length) throw new TypeError(`A track of ${bytes.length} bytes cannot hold ${length} points.`);
  const track: Track = { t: new Float32Array(length), s: new Float32Array(length) };
  decodeTrackInto(bytes, 0, track.t, track.s, 0);
  return track;
}

/** As `decodeTrack`, adding `shiftS` to all times and writing from index `from` on; returns the next free index. */
export function decodeTrackInto(bytes: Uint8Array, shiftS: number, tOut: Float32Array, sOut: Float32Array, from: number): number {
  const cursor: Cursor = { bytes, at: 1 };
  const length = readVarint(cursor);
  let tSteps = 0;
  let sSteps = 0;
  for (let i = 0; i < length; i++) {
    const tStep = readVarint(cursor);
    tSteps += i === 0 ? unzigzag(tStep) : tStep;
    sSteps += unzigzag(readVarint(cursor));
    tOut[from + i] = shiftS + tSteps / STEPS_PER_UNIT;
    sOut[from + i] = sSteps / STEPS_PER_UNIT;
  }
  if (cursor.at !== bytes.length) throw new TypeError(`A track of ${length} points ends at byte ${cursor.at} of ${bytes.length}.`);
  return from + length;
}

interface Cursor {
  bytes: Uint8Array;
  at: number;
}

function toSteps(value: number, index: number): number {
  const steps = Math.round(value * STEPS_PER_UNIT);
  if (!(Math.abs(steps) < MAX_STEPS)) throw new RangeError(`Point ${index} of a track holds ${value}, which cannot be stored.`);
  return steps;
}

const zigzag = (value: number) => (value < 0 ? -2 * value - 1 : 2 * value);
const unzigzag = (value: number) => (value % 2 === 1 ? -(value + 1) / 2 : value / 2);

/** Seven bits in a byte, lowest first; the top bit says that more follow. */
function writeVarint(out: Uint8Array, at: number, value: number): number {
  let rest = value;
  while (rest >= 128) {
    out[at++] = (rest % 128) + 128;
    rest = Math.floor(rest / 128);
  }
  out[at++] = rest;
  return at;
}

function readVarint(cursor: Cursor): number {
  let value = 0;
  let weight = 1;
  for (let i = 0; i < MAX_VARINT_BYTES; i++) {
    if (cursor.at >= cursor.bytes.length) throw new TypeError("A track ends in the middle of a number.");
    const byte = cursor.bytes[cursor.at++];
    value += (byte & 127) * weight;
    if (byte < 128) return value;
    weight *= 128;
  }
  throw new TypeError("A track holds a number that is too long.");
}
