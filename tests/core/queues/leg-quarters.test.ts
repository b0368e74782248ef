import { describe, expect, it } from "vitest";
import { columnReach } from "@/core/queues/column-reach";
import { legQuarters } from "@/core/queues/leg-quarters";
import { DEFAULT_QUEUE_OPTIONS, QUARTER_MS } from "@/core/queues/options";
import { penetrationFromQueues } from "@/core/queues/penetration";
import { findStandings } from "@/core/queues/standings";
import { shockwaveQueue } from "@/core/models/shockwave-queue";
import { seededRandom } from "@/core/stats/random";
import type { LegQuarters } from "@/core/types";
import { oneLeg, passing, stopping, traversalsOf, type TestCourse } from "./one-leg";

const START = 1000 * QUARTER_MS;

function quarters(courses: TestCourse[], storageM = 300): LegQuarters {
  return legQuarters(oneLeg(storageM), traversalsOf(courses));
}

describe("columnReach", () => {
  it.each([
    ["nobody", [], 0],
    ["a column from the line back", [5, 40, 110], 110],
    ["a head within 60 m", [60, 139], 139],
    ["a head too far away", [61, 70], 0],
    ["a gap of more than 80 m", [10, 91, 120], 10],
    ["a vehicle that noise puts past the line", [-4, 70], 70],
  ])("of %s", (_, positions, reach) => expect(columnReach(positions, positions.length, 60, 80)).toBe(reach));
});

describe("findStandings", () => {
  it("finds place and time of a stop", () => {
    const found = findStandings(oneLeg(), traversalsOf([stopping(START, 40, 30)]), DEFAULT_QUEUE_OPTIONS);
    expect(found.length).toBe(1);
    expect(found.s[0]).toBe(40);
    // Arrives after (250 - 40) / 14 = 15 s and stands for 30 s.
    expect((found.fromMs[0] - START) / 1000).toBeCloseTo(15, 0);
    expect((found.toMs[0] - START) / 1000).toBeCloseTo(45, 0);
  });

  it("sees one stop where a queue creeps below 10 km/h, and two where it moved off between", () => {
    const creep: TestCourse = { enterMs: START, points: [[0, 100], [10, 100], [12, 96], [20, 96], [22, 60], [26, -15]] };
    const twice: TestCourse = { enterMs: START, points: [[0, 100], [10, 100], [14, 60], [24, 60], [28, -15]] };
    const count = (c: TestCourse): number => findStandings(oneLeg(), traversalsOf([c]), DEFAULT_QUEUE_OPTIONS).length;
    expect(count(creep)).toBe(1);
    expect(count(twice)).toBe(2);
  });

  it("leaves out who waits past the stop line or inside the upstream junction", () => {
    const past: TestCourse = { enterMs: START, points: [[0, 40], [3, -12], [20, -12], [22, -40]] };
    const upstream: TestCourse = { enterMs: START, points: [[-20, 305], [-5, 305], [0, 250], [18, -15]] };
    expect(findStandings(oneLeg(300), traversalsOf([past, upstream]), DEFAULT_QUEUE_OPTIONS).length).toBe(0);
  });

  it("takes a short stop between two pings from the vehicle's own speed", () => {
    const t = traversalsOf([{ enterMs: START, points: [[0, 250], [5, 190], [10, 150], [15, 120], [20, 60], [25, -15]] }]);
    t.farthestStopM[0] = 150;
    const found = findStandings(oneLeg(), t, DEFAULT_QUEUE_OPTIONS);
    expect([...found.s]).toEqual([150]);
    expect((found.fromMs[0] + found.toMs[0]) / 2).toBe(START + 10_000);
  });
});

describe("legQuarters", () => {
  it("has no entry where nobody was seen, and reach 0 where vehicles passed and none stood", () => {
    expect(quarters([]).length).toBe(0);
    const free = quarters([passing(START + 60_000)]);
    expect(free.length).toBe(1);
    expect([free.startMs[0], free.reachM[0], free.reachEstimateM[0], free.spilledS[0]]).toEqual([START, 0, 0, 0]);
    // 19 s on the way and 30 s of sight on either side, in steps of 5 s.
    expect(free.observedS[0]).toBeGreaterThanOrEqual(75);
    expect(free.observedS[0]).toBeLessThanOrEqual(80);
  });

  it("reads reach off the farthest vehicle of the column", () => {
    const q = quarters([stopping(START, 8, 40), stopping(START + 5000, 60, 35), stopping(START + 10_000, 120, 30)]);
    expect(q.reachM[0]).toBe(120);
  });

  it("does not take a vehicle that stands alone far upstream for the queue", () => {
    const q = quarters([stopping(START, 8, 40), stopping(START + 2000, 150, 30)]);
    expect(q.reachM[0]).toBe(8);
  });

  it("joins vehicles of one red although the head has left before the tail stood", () => {
    const q = quarters([stopping(START, 8, 10), stopping(START + 40_000, 110, 10)]);
    expect(q.reachM[0]).toBe(110);
    const apart = quarters([stopping(START, 8, 10), stopping(START + 90_000, 110, 10)]);
    expect(apart.reachM[0]).toBe(8);
  });

  it("counts the seconds for which the queue fills nine tenths of the storage", () => {
    const near = stopping(START + 50_000, 8, 53);
    const tail = stopping(START + 60_000, 85, 63);
    const full = quarters([near, tail], 90);
    // The last vehicle stands from second 72 to 135 at 85 m of 90 m; whoever stands behind it leaves a little later.
    expect(full.spilledS[0]).toBeGreaterThanOrEqual(60);
    expect(full.spilledS[0]).toBeLessThanOrEqual(65);
    expect(full.reachEstimateM[0]).toBe(90);
    expect(quarters([near, tail], 200).spilledS[0]).toBe(0);
  });

  it("cannot say anything about spillback where the storage is unknown", () => {
    expect(quarters([stopping(START, 40, 30)], NaN).spilledS[0]).toBeNaN();
    expect(quarters([stopping(START, 40, 30)], NaN).reachM[0]).toBe(40);
  });

  it("splits at quarters of an hour", () => {
    const q = quarters([stopping(START + QUARTER_MS - 20_000, 40, 60)]);
    expect([...q.startMs]).toEqual([START, START + QUARTER_MS]);
    expect([...q.reachM]).toEqual([40, 40]);
  });

  it("does not depend on the order of the traversals or on the clock", () => {
    const courses = [stopping(START, 8, 40), stopping(START + 5000, 60, 35), stopping(START + 400_000, 30, 20), passing(START + 700_000)];
    const once = quarters(courses);
    expect(quarters([...courses].reverse())).toEqual(once);
    const later = quarters(courses.map((c) => ({ ...c, enterMs: c.enterMs + 7 * QUARTER_MS })));
    expect({ ...later, startMs: later.startMs.map((t) => t - 7 * QUARTER_MS) }).toEqual(once);
  });

  it("changes no reach when every vehicle is there twice", () => {
    const courses = [stopping(START, 8, 40), stopping(START + 5000, 60, 35), stopping(START + 90_000, 30, 20)];
    expect(quarters([...courses, ...courses]).reachM).toEqual(quarters(courses).reachM);
  });
});

describe("what the sample does not see", () => {
  /** Queues of a shockwave diagram, one red of 45 s in each 90 s, of whose vehicles a share is seen. */
  function shockwaveCourses(share: number): { courses: TestCourse[]; longestM: number } {
    const { longestM } = shockwaveQueue({ freeSpeedKmh: 50.4, waveSpeedKmh: 18, jamVehKm: 1000 / 7.62 }, 45, 600);
    const courses: TestCourse[] = [];
    const random = seededRandom(7);
    for (let cycle = 0; cycle < 200; cycle++) {
      for (let place = 0; place < 15; place++) {
        if (random() >= share) continue;
        const standM = place * 7.62;
        // Joins the queue when a vehicle of 6 s headway would; starts when the wave of 5 m/s has come to it.
        const joinS = place * 6;
        const goS = 45 + standM / 5;
        const enterMs = START + cycle * 90_000 + (joinS - (250 - standM) / 14) * 1000;
        courses.push(goS > joinS ? stopping(enterMs, standM, goS - joinS) : passing(enterMs));
      }
    }
    return { courses, longestM };
  }

  it("is estimated to within three vehicles of the whole queue, and better than seen", () => {
    const { courses, longestM } = shockwaveCourses(0.2);
    const q = quarters(courses);
    const mean = (values: Float32Array): number => values.reduce((sum, value) => sum + value, 0) / values.length;
    expect(Math.abs(mean(q.reachEstimateM) - longestM)).toBeLessThan(3 * 7.62);
    expect(mean(q.reachEstimateM)).toBeGreaterThan(mean(q.reachM) + 3);
    q.reachEstimateM.forEach((estimate, k) => expect(estimate).toBeGreaterThanOrEqual(q.reachM[k]));
  });

  it("does not fill a leg from the few that a thin sample sees stand", () => {
    // One vehicle in most quarters: that somebody was looked at says nothing of how many others came.
    const lone = Array.from({ length: 8 }, (_, k) => stopping(START + k * QUARTER_MS + 60_000, 30, 45));
    const pair = [stopping(START + 8 * QUARTER_MS + 60_000, 8, 40), stopping(START + 8 * QUARTER_MS + 62_000, 60, 40)];
    const q = quarters([...lone, ...pair], 100);
    expect(Math.max(...q.spilledS)).toBe(0);
    expect(Math.max(...q.reachEstimateM.subarray(0, 8))).toBeLessThan(50);
  });

  it("gives the share of vehicles seen", () => {
    const { courses } = shockwaveCourses(0.2);
    expect(Math.abs(penetrationFromQueues(oneLeg(), traversalsOf(courses)) - 0.2)).toBeLessThan(0.04);
  });

  it("is not misled by legs of two lanes, which show twice the share", () => {
    const network = oneLeg();
    const courses: TestCourse[] = [];
    const one = shockwaveCourses(0.1).courses;
    const two = shockwaveCourses(0.2).courses;
    for (let leg = 0; leg < 10; leg++) {
      network.legs[leg] = { ...network.legs[0], id: `L${leg}` };
      network.movements[leg] = { ...network.movements[0], id: `L${leg}>E`, leg };
      courses.push(...(leg < 4 ? one : two).map((c) => ({ ...c, movement: leg })));
    }
    const share = penetrationFromQueues(network, traversalsOf(courses));
    expect(Math.abs(share - 0.1)).toBeLessThan(0.03);
  });

  it("says nothing of the share from a handful of queues", () => {
    expect(penetrationFromQueues(oneLeg(), traversalsOf([stopping(START, 8, 40)]))).toBeNaN();
  });
});
