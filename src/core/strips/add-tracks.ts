import type { Strip } from "./strip";
import type { TrackSet } from "./track-set";

/** What of a segment lies in a strip: from `p0` to `p1`, shares of the segment. */
interface Clip {
  p0: number;
  p1: number;
}

/**
 * Adds tracks to a strip: every straight piece between two points is cut exactly at the cell edges, and
 * its distance and time go to the cell that holds it (Edie's generalised definitions, 1963). A piece that
 * runs along an edge belongs to the cell that begins there, so nothing is counted twice. `include`, where
 * given, holds 1 for each track that counts. Tracks of one day must follow each other, as in a decoded set.
 * O(points + edges crossed); nothing is allocated for a piece.
 */
export function addTracks(strip: Strip, set: TrackSet, include?: Uint8Array): void {
  const cells = strip.timeS.length;
  const lastTrack = new Int32Array(cells).fill(-1);
  const lastDay = new Int32Array(cells).fill(-(2 ** 31));
  const visit = { strip, lastTrack, lastDay, track: 0, day: 0 };
  const clip: Clip = { p0: 0, p1: 0 };
  for (let track = 0; track < set.tracks; track++) {
    if (include && include[track] === 0) continue;
    visit.track = track;
    visit.day = set.day[track];
    const end = set.offset[track + 1];
    for (let p = set.offset[track]; p + 1 < end; p++) {
      addPiece(visit, set.tS[p], set.sM[p], set.tS[p + 1], set.sM[p + 1], clip);
    }
  }
}

interface Visit {
  strip: Strip;
  lastTrack: Int32Array;
  lastDay: Int32Array;
  track: number;
  day: number;
}

/** Walks the cells that a piece crosses, in cell coordinates u (columns) and v (rows). */
function addPiece(visit: Visit, t0: number, s0: number, t1: number, s1: number, clip: Clip): void {
  const { startS, cellS, columns, bottomM, cellM, rows, waveMs } = visit.strip.spec;
  const seconds = t1 - t0;
  const metres = s0 - s1;
  const u0 = (t0 - s0 / waveMs - startS) / cellS;
  const v0 = (s0 - bottomM) / cellM;
  const du = (t1 - s1 / waveMs - startS) / cellS - u0;
  const dv = (s1 - bottomM) / cellM - v0;
  clip.p0 = 0;
  clip.p1 = 1;
  if (!cut(clip, u0, du, columns) || !cut(clip, v0, dv, rows)) return;

  let p = clip.p0;
  const end = clip.p1;
  let column = clamp(Math.floor(u0 + p * du), columns);
  let row = clamp(Math.floor(v0 + p * dv), rows);
  const stepU = du > 0 ? 1 : -1;
  const stepV = dv > 0 ? 1 : -1;
  const edgeU = du > 0 ? 1 : 0;
  const edgeV = dv > 0 ? 1 : 0;
  for (;;) {
    const nextU = du === 0 ? Infinity : (column + edgeU - u0) / du;
    const nextV = dv === 0 ? Infinity : (row + edgeV - v0) / dv;
    const next = Math.min(nextU, nextV);
    const isLast = !(next < end) || leavesAt(nextU <= nextV ? column + stepU : row + stepV, nextU <= nextV ? columns : rows);
    const until = isLast ? end : next;
    if (until > p) {
      tally(visit, row * columns + column, metres * (until - p), seconds * (until - p));
      p = until;
    }
    if (isLast) return;
    if (nextU <= nextV) column += stepU;
    else row += stepV;
  }
}

function tally(visit: Visit, cell: number, metres: number, seconds: number): void {
  const { strip, lastTrack, lastDay, track, day } = visit;
  strip.distanceM[cell] += metres;
  strip.timeS[cell] += seconds;
  if (lastTrack[cell] === track) return;
  lastTrack[cell] = track;
  strip.vehicles[cell] += 1;
  if (lastDay[cell] === day) return;
  lastDay[cell] = day;
  strip.days[cell] += 1;
}

/** Narrows the clip to where x0 + p * dx lies in [0, size) (parametric line clipping, Liang and Barsky 1984); false when nothing is left. */
function cut(clip: Clip, x0: number, dx: number, size: number): boolean {
  if (dx === 0) return x0 >= 0 && x0 < size;
  const a = -x0 / dx;
  const b = (size - x0) / dx;
  clip.p0 = Math.max(clip.p0, Math.min(a, b));
  clip.p1 = Math.min(clip.p1, Math.max(a, b));
  // Written as a positive test so that NaN falls outside too.
  return clip.p0 < clip.p1;
}

const clamp = (index: number, size: number) => (index < 0 ? 0 : index >= size ? size - 1 : index);
const leavesAt = (index: number, size: number) => index < 0 || index >= size;
