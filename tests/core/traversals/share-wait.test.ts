import { describe, expect, it } from "vitest";
import { createCourse, KNOTS, timeAt } from "@/core/traversals/course";
import { fillGaps } from "@/core/traversals/fill-gaps";
import { KNOTS_A_STEP } from "@/core/traversals/share-wait";
import { summariseStops } from "@/core/traversals/stops";
import { courseOf } from "./courses";

function filled(rows: [number, number, number][], lines: number[]) {
  const from = courseOf(rows, 10);
  const to = createCourse(from.length * KNOTS_A_STEP);
  fillGaps(from, lines, to);
  return to;
}

/** Seconds from one place to another on the filled course. */
function secondsBetween(course: ReturnType<typeof filled>, from: number, to: number): number {
  return (timeAt(course, to) - timeAt(course, from)) / 1000;
}

describe("a wait that may have been at several stop lines", () => {
  // From a stand to 36 km/h at 1.9 m/s2 and on at 10 m/s: 5.263 + 17.368 = 22.631 s for 200 m; 37.369 s of 60 are waited.
  const parted = 37.369 / 2;

  it("halves the wait of a vehicle that stood at one line and passed another", () => {
    const course = filled([[0, 50, 0], [60, 250, 36]], [60, 160]);
    const alone = filled([[0, 50, 0], [60, 250, 36]], [60]);
    expect(secondsBetween(alone, 140, 180)).toBeCloseTo(4, 1);
    expect(secondsBetween(course, 140, 180)).toBeCloseTo(4 + parted, 1);
    expect(timeAt(course, 100)).toBeCloseTo(timeAt(alone, 100) - parted * 1000, -2);
    expect(timeAt(course, 240)).toBeCloseTo(timeAt(alone, 240), -2);
  });

  it("halves the wait of a vehicle that passed a line and now stands at another", () => {
    // 200 m at 10 m/s and braking: 18.077 + 3.846 = 21.923 s; 38.077 s of 60 are waited.
    const course = filled([[0, 0, 36], [60, 200, 0]], [100, 210]);
    expect(secondsBetween(course, 80, 120)).toBeCloseTo(4 + 38.077 / 2, 1);
  });

  it("gives three lines a third each of a hidden wait", () => {
    // 400 m at 10 m/s are 40 s, braking and speeding up lose 4.555 s: of 100 s 55.445 are waited.
    const course = filled([[0, 0, 36], [100, 400, 36]], [100, 200, 300]);
    expect(secondsBetween(course, 190, 210)).toBeCloseTo(2 + 55.445 / 3, 1);
    expect(secondsBetween(course, 290, 310)).toBeCloseTo(2 + 55.445 / 3, 1);
  });

  it("leaves a wait alone where the step passes no other line", () => {
    const one = filled([[0, 0, 36], [40, 200, 36]], [150]);
    expect(Array.from(one.speedMs.subarray(0, one.length)).some(Number.isNaN)).toBe(false);
  });

  it("shares nothing with a line that the first ping lies past", () => {
    const course = filled([[0, 50, 36], [60, 250, 0]], [48, 260]);
    expect(Array.from(course.speedMs.subarray(0, course.length)).some(Number.isNaN)).toBe(false);
  });

  it("counts one stop, and tells no place of the shared part", () => {
    const course = filled([[0, 50, 0], [60, 250, 36]], [60, 160]);
    expect(summariseStops(course, -1, 60_000, 0, 250).stops).toBe(1);
    const shared = Array.from({ length: course.length }, (_, i) => i).filter((i) => course.distanceM[i] === 160);
    expect(shared.map((i) => course.kind[i])).toEqual([KNOTS.unplaced, KNOTS.unplaced]);
  });
});
