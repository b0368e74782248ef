import type { Network, Traversals } from "@/core/types";

/** A network of one junction with one leg of the given storage and one movement straight on. */
export function oneLeg(storageM = 300): Network {
  return {
    junctions: [{ id: "J1", lat: 45.6, lon: -38.3 }],
    legs: [
      {
        id: "J1-N", junction: 0, name: "from the north", bearingDeg: 180, line: Float64Array.of(0, 10, 0, 610), lengthM: 600, upstreamExit: -1,
        storageM, freeSpeedMs: 14, speedLimitMs: NaN, origin: "derived", stopLineOrigin: "derived", locked: false, support: 40, doubts: [],
      },
    ],
    exits: [{ id: "J1-s", junction: 0, bearingDeg: 180, line: Float64Array.of(0, -10, 0, -200), lengthM: 190, support: 40 }],
    movements: [
      {
        id: "J1-N>J1-s", leg: 0, exit: 0, turnDeg: 0, turn: "through", referenceS: 25, referenceSource: "unstopped", referenceN: 40,
        cordonUpM: 250, cordonDownM: 60,
      },
    ],
    driveSide: "right",
  };
}

export interface TestCourse {
  /** Crossing of the cordon at 250 m, ms UTC. */
  enterMs: number;
  /** Pairs of seconds after enterMs and metres to the stop line. */
  points: [number, number][];
  vehicle?: number;
  movement?: number;
  delayS?: number;
  stops?: number;
}

/** Traversals with the given tracks; the stop line is crossed at the last point. */
export function traversalsOf(courses: TestCourse[]): Traversals {
  const offset = [0];
  for (const c of courses) offset.push(offset[offset.length - 1] + c.points.length);
  const end = (c: TestCourse): number => c.enterMs + (c.points.at(-1)?.[0] ?? 0) * 1000;
  return {
    length: courses.length,
    movement: Uint32Array.from(courses, (c) => c.movement ?? 0),
    vehicle: Uint32Array.from(courses, (c, i) => c.vehicle ?? i),
    enterMs: Float64Array.from(courses, (c) => c.enterMs),
    stopLineMs: Float64Array.from(courses, end),
    exitMs: Float64Array.from(courses, end),
    delayS: Float32Array.from(courses, (c) => c.delayS ?? 0),
    stops: Uint8Array.from(courses, (c) => c.stops ?? 0),
    stoppedS: new Float32Array(courses.length),
    farthestStopM: new Float32Array(courses.length).fill(NaN),
    flags: new Uint8Array(courses.length),
    trackOffset: Uint32Array.from(offset),
    trackT: Float32Array.from(courses.flatMap((c) => c.points.map(([t]) => t))),
    trackS: Float32Array.from(courses.flatMap((c) => c.points.map(([, s]) => s))),
  };
}

/** Every second: 14 m/s from 250 m to `standM`, there for `standS`, then 10 m/s to 15 m past the line. */
export function stopping(enterMs: number, standM: number, standS: number): TestCourse {
  const arriveS = (250 - standM) / 14;
  const points: [number, number][] = [];
  for (let t = 0; ; t++) {
    const s = t <= arriveS ? 250 - 14 * t : t <= arriveS + standS ? standM : standM - 10 * (t - arriveS - standS);
    points.push([t, s]);
    if (s <= -15) return { enterMs, points };
  }
}

/** Every second at 14 m/s, without a stop. */
export function passing(enterMs: number): TestCourse {
  return { enterMs, points: Array.from({ length: 20 }, (_, t): [number, number] => [t, 250 - 14 * t]) };
}
