import { bearingDeg } from "@/core/geometry/angles";
import { eastM, northM, planeAt } from "@/core/geometry/plane";
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
  const plane = planeAt(trips.lat[from], trips.lon[from]);
  const step = (i: number, k: number): [number, number] => [
    eastM(plane, trips.lon[k]) - eastM(plane, trips.lon[i]), northM(plane, trips.lat[k]) - northM(plane, trips.lat[i]),
  ];
  for (let a = from; a < to; a++) {
    if (!Number.isNaN(trips.headingDeg[a])) continue;
    let b = a;
    while (b + 1 < to && Number.isNaN(trips.headingDeg[b + 1])) b += 1;
    let before = Math.max(from, a - 1);
    while (before > from && a - before < STANDING_LOOKS && Math.hypot(...step(a, before)) < HEADING_MIN_STEP_M) before -= 1;
    let after = Math.min(to - 1, b + 1);
    while (after < to - 1 && after - b < STANDING_LOOKS && Math.hypot(...step(b, after)) < HEADING_MIN_STEP_M) after += 1;
    const [dx, dy] = step(before, after);
    if (Math.hypot(dx, dy) >= HEADING_MIN_STEP_M) trips.headingDeg.fill(bearingDeg(dx, dy), a, b + 1);
    a = b;
  }
}

function fillTrip(trips: Trips, from: number, to: number): void {
  const plane = planeAt(trips.lat[from], trips.lon[from]);
  for (let i = from; i < to; i++) {
    const speedGiven = Number.isFinite(trips.speedMs[i]);
    const headingGiven = Number.isFinite(trips.headingDeg[i]);
    if (speedGiven && headingGiven) {
      if (trips.speedMs[i] < HEADING_MIN_SPEED_MS) trips.headingDeg[i] = NaN;
      continue;
    }
    const a = Math.max(from, i - 1);
    const b = Math.min(to - 1, i + 1);
    const seconds = (trips.tMs[b] - trips.tMs[a]) / 1000;
    const dx = eastM(plane, trips.lon[b]) - eastM(plane, trips.lon[a]);
    const dy = northM(plane, trips.lat[b]) - northM(plane, trips.lat[a]);
    const step = Math.hypot(dx, dy);
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
  const steps = new Float64Array(Math.max(0, to - from - 1));
  let speeds = 0;
  for (let i = from; i < to; i++) {
    if (Number.isFinite(trips.speedMs[i])) speeds += 1;
    if (i > from) steps[i - from - 1] = (trips.tMs[i] - trips.tMs[i - 1]) / 1000;
  }
  steps.sort();
  trips.tripIntervalS[k] = steps.length > 0 ? steps[steps.length >> 1] : NaN;
  trips.tripHasSpeed[k] = speeds * 2 > to - from ? 1 : 0;
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
