import { bearingDeg } from "@/core/geometry/angles";
import { eastM, northM, planeAt, type Plane } from "@/core/geometry/plane";
import type { Trips } from "@/core/pings/trips";

/** Below this speed a reported heading is noise, m/s. */
const HEADING_MIN_SPEED_MS = 1.5;
/** A displacement tells a direction once it is well above the position noise, m. */
const HEADING_MIN_STEP_M = 12;
/** Pings looked at on either side of a standstill. */
const STANDING_LOOKS = 6;
/** Longest time between the two pings whose displacement may stand for a heading, s. */
const HEADING_MAX_STEP_S = 45;

/** Completes speed and heading from displacements, and states what the sample carries. O(n). */
export function fillMotion(trips: Trips): void {
  let speeds = 0;
  let headings = 0;
  for (let i = 0; i < trips.length; i++) {
    if (Number.isFinite(trips.speedMs[i])) speeds += 1;
    if (Number.isFinite(trips.headingDeg[i])) headings += 1;
  }
  trips.hasSpeed = speeds * 2 > trips.length;
  trips.hasHeading = headings * 2 > trips.length;
  trips.medianIntervalS = medianInterval(trips);
  for (let k = 0; k < trips.count; k++) {
    describeTrip(trips, k);
    fillTrip(trips, trips.tripOffset[k], trips.tripOffset[k + 1]);
    faceStanding(trips, trips.tripOffset[k], trips.tripOffset[k + 1]);
  }
}

/** Gives the pings of a standstill the direction from where the vehicle came from to where it went on, 12 m or more away. */
function faceStanding(trips: Trips, from: number, to: number): void {
  const { lat, lon, headingDeg } = trips;
  const plane = planeAt(lat[from], lon[from]);
  for (let a = from; a < to; a++) {
    if (headingDeg[a] === headingDeg[a]) continue;
    let b = a;
    while (b + 1 < to && Number.isNaN(headingDeg[b + 1])) b += 1;
    let before = Math.max(from, a - 1);
    while (before > from && a - before < STANDING_LOOKS && isNear(trips, plane, a, before)) before -= 1;
    let after = Math.min(to - 1, b + 1);
    while (after < to - 1 && after - b < STANDING_LOOKS && isNear(trips, plane, b, after)) after += 1;
    if (!isNear(trips, plane, before, after)) {
      const bearing = bearingDeg(eastM(plane, lon[after]) - eastM(plane, lon[before]), northM(plane, lat[after]) - northM(plane, lat[before]));
      headingDeg.fill(bearing, a, b + 1);
    }
    a = b;
  }
}

function isNear({ lat, lon }: Trips, plane: Plane, a: number, b: number): boolean {
  const dx = eastM(plane, lon[b]) - eastM(plane, lon[a]);
  const dy = northM(plane, lat[b]) - northM(plane, lat[a]);
  return dx * dx + dy * dy < HEADING_MIN_STEP_M * HEADING_MIN_STEP_M;
}

function fillTrip(trips: Trips, from: number, to: number): void {
  const { speedMs, headingDeg } = trips;
  const plane = planeAt(trips.lat[from], trips.lon[from]);
  for (let i = from; i < to; i++) {
    const speedGiven = Number.isFinite(speedMs[i]);
    const headingGiven = Number.isFinite(headingDeg[i]);
    if (speedGiven && headingGiven) {
      if (speedMs[i] < HEADING_MIN_SPEED_MS) headingDeg[i] = NaN;
      continue;
    }
    const a = Math.max(from, i - 1);
    const b = Math.min(to - 1, i + 1);
    const seconds = (trips.tMs[b] - trips.tMs[a]) / 1000;
    const dx = eastM(plane, trips.lon[b]) - eastM(plane, trips.lon[a]);
    const dy = northM(plane, trips.lat[b]) - northM(plane, trips.lat[a]);
    const step = Math.sqrt(dx * dx + dy * dy);
    if (!speedGiven && seconds > 0) trips.speedMs[i] = step / seconds;
    const moving = trips.speedMs[i] >= HEADING_MIN_SPEED_MS;
    if (!headingGiven) {
      const tells = step >= HEADING_MIN_STEP_M && seconds <= HEADING_MAX_STEP_S;
      trips.headingDeg[i] = tells && moving ? bearingDeg(dx, dy) : NaN;
    } else if (!moving) trips.headingDeg[i] = NaN;
  }
}

function describeTrip(trips: Trips, k: number): void {
  const from = trips.tripOffset[k];
  const to = trips.tripOffset[k + 1];
  let speeds = 0;
  for (let i = from; i < to; i++) if (Number.isFinite(trips.speedMs[i])) speeds += 1;
  trips.tripIntervalS[k] = medianStepS(trips.tMs, from, to);
  trips.tripHasSpeed[k] = speeds * 2 > to - from ? 1 : 0;
}

/** The upper of two middle ones; NaN without any. A trip of even steps, the usual one, is told without sorting. */
function medianStepS(tMs: Float64Array, from: number, to: number): number {
  if (to - from < 2) return NaN;
  const first = tMs[from + 1] - tMs[from];
  let [shorter, longer] = [0, 0];
  for (let i = from + 1; i < to; i++) {
    const step = tMs[i] - tMs[i - 1];
    if (step < first) shorter += 1;
    else if (step > first) longer += 1;
  }
  const rank = (to - from - 1) >> 1;
  if (shorter <= rank && rank < to - from - 1 - longer) return first / 1000;
  const steps = Float64Array.from({ length: to - from - 1 }, (_, n) => tMs[from + n + 1] - tMs[from + n]).sort();
  return steps[rank] / 1000;
}

/** Median over at most about 20 000 intervals, taken evenly. */
function medianInterval(trips: Trips): number {
  const step = Math.max(1, Math.floor(trips.count / 4000));
  const values: number[] = [];
  for (let k = 0; k < trips.count; k += step) {
    const end = Math.min(trips.tripOffset[k + 1], trips.tripOffset[k] + 60);
    for (let i = trips.tripOffset[k] + 1; i < end; i++) values.push(trips.tMs[i] - trips.tMs[i - 1]);
  }
  if (values.length === 0) return NaN;
  const sorted = Float64Array.from(values).sort();
  return sorted[sorted.length >> 1] / 1000;
}
