import { KNOTS, type Course } from "@/core/traversals/course";
import { shareWait } from "@/core/traversals/share-wait";
import { STOPPING } from "@/core/traversals/stops";

const { brakeMs2, speedUpMs2, stopMs } = STOPPING;

/** Settings of what happened between two pings. */
export const FILLING = Object.freeze({
  /** Shorter steps are left to the interpolation, s. */
  leastStepS: 3.5,
  /** A stand must explain at least this much time, s. */
  leastStandS: 1.5,
  /** A hidden stop whose place is known within this distance counts as placed, m. */
  placedWithinM: 25,
  /** Room that noise may take from braking and speeding up, m. */
  slackM: 4,
  /** Vehicles drive at this share of the free speed when nothing tells better. */
  driveShare: 0.9,
  /** Over short steps, speeds that must have dipped below this count as a stop, m/s; longer steps hide too much. */
  dipBelowMs: 0.3,
  dipMostStepS: 6.5,
  /** Past a stop line vehicles are slow because they turn, m. */
  turningM: 45,
  /** A vehicle that waits for a signal does not stand farther past the line than this, m. */
  pastLineM: 4,
});

/**
 * Copies a course and puts points in where kinematics tell what happened between two pings: when a standing vehicle
 * set off, when a vehicle that now stands came to a stand, and a stop in between that the time cannot explain
 * otherwise. Braking 2.6 and speeding up 1.9 m/s2. `lines` are the path distances of the stop lines, ascending.
 * Where the step passes more stop lines, the wait is shared with them (see shareWait). `to` must hold
 * KNOTS_A_STEP times the points of `from`. O(n).
 */
export function fillGaps(from: Course, lines: ArrayLike<number>, to: Course): void {
  to.length = 0;
  let line = 0;
  for (let i = 0; i < from.length; i++) {
    put(to, from.tMs[i], from.distanceM[i], from.speedMs[i], from.freeMs[i], KNOTS.ping);
    if (i + 1 === from.length) break;
    while (line < lines.length && lines[line] + FILLING.pastLineM < from.distanceM[i]) line += 1;
    const seconds = (from.tMs[i + 1] - from.tMs[i]) / 1000;
    const isKnown = from.speedMs[i] >= 0 && from.speedMs[i + 1] >= 0;
    const passed = line > 0 ? lines[line - 1] : -Infinity;
    if (seconds < FILLING.leastStepS || !isKnown) continue;
    const first = to.length;
    fillStep(from, i, passed, line < lines.length ? lines[line] : Infinity, to);
    if (to.length > first) shareWait(from, i, lines, line, first, to);
  }
}

function put(to: Course, tMs: number, distanceM: number, speedMs: number, freeMs: number, kind: number): void {
  const n = to.length++;
  to.tMs[n] = tMs;
  to.distanceM[n] = distanceM;
  to.speedMs[n] = speedMs;
  to.freeMs[n] = freeMs;
  to.kind[n] = kind;
}

function fillStep(from: Course, i: number, passed: number, line: number, to: Course): void {
  const v0 = from.speedMs[i];
  const v1 = from.speedMs[i + 1];
  if (v0 < stopMs && v1 < stopMs) return;
  if (v0 < stopMs) setOff(from, i, to);
  else if (v1 < stopMs) comeToStand(from, i, to);
  else hiddenStop(from, i, passed, line, to);
}

/** From a stand at ping i: waits, speeds up to the next ping's speed, drives on. */
function setOff(from: Course, i: number, to: Course): void {
  const seconds = (from.tMs[i + 1] - from.tMs[i]) / 1000;
  const step = from.distanceM[i + 1] - from.distanceM[i];
  const v1 = from.speedMs[i + 1];
  const reachM = (v1 * v1) / (2 * speedUpMs2);
  const drive = Math.max(v1, FILLING.driveShare * from.freeMs[i]);
  const goS = step >= reachM ? v1 / speedUpMs2 + (step - reachM) / drive : (2 * step) / v1;
  const standS = seconds - goS;
  if (standS < FILLING.leastStandS) return;
  const offMs = from.tMs[i] + standS * 1000;
  put(to, offMs, from.distanceM[i], 0, from.freeMs[i], KNOTS.placed);
  if (step > reachM + 1) put(to, offMs + (v1 / speedUpMs2) * 1000, from.distanceM[i] + reachM, v1, from.freeMs[i], KNOTS.placed);
}

/** Drives on from ping i, brakes, and stands where ping i + 1 stands. */
function comeToStand(from: Course, i: number, to: Course): void {
  const seconds = (from.tMs[i + 1] - from.tMs[i]) / 1000;
  const step = from.distanceM[i + 1] - from.distanceM[i];
  const v0 = from.speedMs[i];
  const brakeM = (v0 * v0) / (2 * brakeMs2);
  const drive = Math.max(v0, FILLING.driveShare * from.freeMs[i]);
  const comeS = step >= brakeM ? v0 / brakeMs2 + (step - brakeM) / drive : (2 * step) / v0;
  const standS = seconds - comeS;
  if (standS < FILLING.leastStandS) return;
  const standMs = from.tMs[i + 1] - standS * 1000;
  if (step > brakeM + 1) put(to, standMs - (v0 / brakeMs2) * 1000, from.distanceM[i + 1] - brakeM, v0, from.freeMs[i], KNOTS.placed);
  put(to, standMs, from.distanceM[i + 1], 0, from.freeMs[i], KNOTS.placed);
}

/** A stop between two moving pings, upstream of the stop line where that leaves room. */
function hiddenStop(from: Course, i: number, passed: number, line: number, to: Course): void {
  const seconds = (from.tMs[i + 1] - from.tMs[i]) / 1000;
  const step = from.distanceM[i + 1] - from.distanceM[i];
  const v0 = from.speedMs[i];
  const v1 = from.speedMs[i + 1];
  const brakeM = (v0 * v0) / (2 * brakeMs2);
  const reachM = (v1 * v1) / (2 * speedUpMs2);
  const rest = step - brakeM - reachM;
  if (rest < -FILLING.slackM) return dip(from, i, passed, to);
  const drive = Math.max(v0, v1, FILLING.driveShare * from.freeMs[i]);
  const speedUpS = Math.max(0, drive - Math.max(v0, v1)) / speedUpMs2 / 2;
  const driveS = Math.max(0, rest) / drive + (rest > 2 * drive ? speedUpS : 0);
  const standS = seconds - v0 / brakeMs2 - v1 / speedUpMs2 - driveS;
  if (standS < FILLING.leastStandS) return dip(from, i, passed, to);
  const earliest = from.distanceM[i] + Math.min(brakeM, step);
  const latest = Math.max(earliest, from.distanceM[i + 1] - reachM);
  const last = line + FILLING.pastLineM >= earliest ? Math.min(latest, line + FILLING.pastLineM) : latest;
  const place = (earliest + last) / 2;
  const kind = last - earliest <= FILLING.placedWithinM ? KNOTS.placed : KNOTS.unplaced;
  const standMs = from.tMs[i] + ((place - from.distanceM[i] - brakeM) / drive + v0 / brakeMs2) * 1000;
  const offMs = Math.min(from.tMs[i + 1] - 1, standMs + standS * 1000);
  if (!(standMs > from.tMs[i] && offMs > standMs)) return;
  put(to, standMs, place, 0, from.freeMs[i], kind);
  put(to, offMs, place, 0, from.freeMs[i], kind);
  const upMs = offMs + (v1 / speedUpMs2) * 1000;
  if (place + reachM + 1 < from.distanceM[i + 1] && upMs < from.tMs[i + 1]) put(to, upMs, place + reachM, v1, from.freeMs[i], kind);
}

/**
 * A moment of (nearly) standing between two moving pings a few seconds apart: the lowest speed of a course that brakes
 * and speeds up over the whole step, at rates in the usual ratio.
 */
function dip(from: Course, i: number, passed: number, to: Course): void {
  const seconds = (from.tMs[i + 1] - from.tMs[i]) / 1000;
  if (seconds > FILLING.dipMostStepS) return;
  const v0 = from.speedMs[i];
  const v1 = from.speedMs[i + 1];
  const step = from.distanceM[i + 1] - from.distanceM[i];
  let lowest = (2 * step) / seconds - (v0 + v1) / 2;
  let brakeS = seconds / 2;
  for (let round = 0; round < 3; round++) {
    const braking = Math.max(0, v0 - lowest) / brakeMs2;
    const speeding = Math.max(0, v1 - lowest) / speedUpMs2;
    if (braking + speeding <= 0) return;
    brakeS = (seconds * braking) / (braking + speeding);
    lowest = (2 * step - brakeS * v0 - (seconds - brakeS) * v1) / seconds;
  }
  if (!(lowest < FILLING.dipBelowMs) || v0 - lowest > 1.5 * brakeMs2 * brakeS) return;
  const moved = Math.min(step, Math.max(0, (brakeS * (v0 + Math.max(0, lowest))) / 2));
  if (from.distanceM[i] + moved < passed + FILLING.turningM) return;
  put(to, from.tMs[i] + brakeS * 1000, from.distanceM[i] + moved, Math.max(0, lowest), from.freeMs[i], KNOTS.placed);
}
