import { decodeTrackInto, trackLength } from "./track-codec";

/**
 * Many tracks of one leg, as columns. Points of track i: entries offset[i] to offset[i + 1] of tS and sM.
 * Tracks are in order of their local day.
 */
export interface TrackSet {
  tracks: number;
  /** Days since 1970-01-01 of the local calendar day on which the vehicle entered. */
  day: Int32Array;
  /** Seconds after that day's local midnight at which the vehicle crossed the upstream cordon. */
  enterS: Float32Array;
  /** Key of the movement: the number that the caller knows it by. */
  movement: Uint32Array;
  delayS: Float32Array;
  offset: Uint32Array;
  /** Seconds after the local midnight of `day`. */
  tS: Float32Array;
  /** Distance to the stop line, metres, negative past it. */
  sM: Float32Array;
}

/** One traversal as it is stored; `track` is what `encodeTrack` wrote, its times counted from the entry. */
export interface StoredTrack {
  day: number;
  enterS: number;
  movement: number;
  delayS: number;
  track: Uint8Array;
}

const MAGIC = 0x4b4d4c54;
const VERSION = 1;
const HEADER_BYTES = 16;
const BYTES_PER_TRACK = 5 * 4;
const BYTES_PER_POINT = 2 * 4;

/**
 * Builds the bytes of a track set straight from stored tracks, ordered by day.
 * Layout, little-endian: "TLMK", version, tracks, points (uint32 each), then the columns of `TrackSet`
 * in the order day, enterS, movement, delayS, offset (one more than tracks), tS, sM, four bytes a value.
 * Throws TypeError when a track cannot be read. O(points).
 */
export function encodeTrackSet(stored: readonly StoredTrack[]): Uint8Array<ArrayBuffer> {
  const ordered = isOrdered(stored) ? stored : [...stored].sort((a, b) => a.day - b.day);
  let points = 0;
  for (const one of ordered) points += trackLength(one.track);
  const buffer = new ArrayBuffer(bytesNeeded(ordered.length, points));
  new Uint32Array(buffer, 0, 4).set([MAGIC, VERSION, ordered.length, points]);
  const set = viewOf(buffer, ordered.length, points);
  ordered.forEach((one, i) => {
    set.day[i] = one.day;
    set.enterS[i] = one.enterS;
    set.movement[i] = one.movement;
    set.delayS[i] = one.delayS;
    set.offset[i + 1] = decodeTrackInto(one.track, one.enterS, set.tS, set.sM, set.offset[i]);
  });
  return new Uint8Array(buffer);
}

/** Views into the buffer, no copy. Throws TypeError for foreign, cut or overlong bytes. */
export function decodeTrackSet(buffer: ArrayBuffer): TrackSet {
  if (buffer.byteLength < HEADER_BYTES) throw new TypeError("Not a track set: too few bytes.");
  const [magic, version, tracks, points] = new Uint32Array(buffer, 0, 4);
  if (magic !== MAGIC) throw new TypeError("Not a track set.");
  if (version !== VERSION) throw new TypeError(`Track set version ${version}, expected ${VERSION}.`);
  const expected = bytesNeeded(tracks, points);
  if (buffer.byteLength !== expected) throw new TypeError(`A track set of ${expected} bytes came as ${buffer.byteLength}.`);
  const set = viewOf(buffer, tracks, points);
  if (set.offset[tracks] !== points) throw new TypeError(`A track set of ${points} points accounts for ${set.offset[tracks]}.`);
  return set;
}

function bytesNeeded(tracks: number, points: number): number {
  return HEADER_BYTES + tracks * BYTES_PER_TRACK + 4 + points * BYTES_PER_POINT;
}

function viewOf(buffer: ArrayBuffer, tracks: number, points: number): TrackSet {
  let at = HEADER_BYTES;
  const next = (values: number) => {
    const from = at;
    at += values * 4;
    return from;
  };
  return {
    tracks,
    day: new Int32Array(buffer, next(tracks), tracks),
    enterS: new Float32Array(buffer, next(tracks), tracks),
    movement: new Uint32Array(buffer, next(tracks), tracks),
    delayS: new Float32Array(buffer, next(tracks), tracks),
    offset: new Uint32Array(buffer, next(tracks + 1), tracks + 1),
    tS: new Float32Array(buffer, next(points), points),
    sM: new Float32Array(buffer, next(points), points),
  };
}

function isOrdered(stored: readonly StoredTrack[]): boolean {
  return stored.every((one, i) => i === 0 || stored[i - 1].day <= one.day);
}
