import { describe, expect, it } from "vitest";
import { createCourse, KNOTS } from "@/core/traversals/course";
import { fillGaps } from "@/core/traversals/fill-gaps";
import { summariseStops } from "@/core/traversals/stops";
import { courseOf } from "./courses";

describe("stops", () => {
  it("counts one stop while the vehicle only creeps: below 5 km/h until above 10 km/h", () => {
    const course = courseOf([[0, 0, 40], [5, 40, 4], [10, 42, 8], [15, 48, 3], [20, 50, 12], [25, 90, 40]]);
    const seen = summariseStops(course, 0, 25_000, 0, 200);
    expect(seen).toMatchObject({ stops: 1, firstStopAtM: 40, inferred: false, hasLongSteps: false });
    // Standing or creeping from the ping at 5 s to the last slow one at 15 s.
    expect(seen.stoppedS).toBe(5);
  });

  it("counts a second stop after 10 km/h was passed", () => {
    const course = courseOf([[0, 0, 40], [5, 40, 0], [10, 60, 20], [15, 90, 0], [20, 110, 30]]);
    expect(summariseStops(course, 0, 20_000, 0, 200).stops).toBe(2);
  });

  it("counts only between the two times and places only on the stretch", () => {
    const course = courseOf([[0, 0, 0], [5, 0, 0], [10, 50, 40], [15, 100, 0], [20, 150, 40]]);
    expect(summariseStops(course, 10_000, 20_000, 90, 200)).toMatchObject({ stops: 1, firstStopAtM: 100 });
  });

  it("knows a vehicle that creeps into the window for one that stood before it", () => {
    const before: [number, number, number][] = Array.from({ length: 30 }, (_, i) => [5 * i, 50 * i, 36]);
    const course = courseOf([...before, [150, 1500, 0], [155, 1502, 8], [160, 1505, 3], [165, 1540, 36], [170, 1590, 36]]);
    // The stop began before 152 s: it is none of this window, whose standing seconds run until the last slow ping.
    expect(summariseStops(course, 152_000, 170_000, 1501, 1600)).toMatchObject({ stops: 0, stoppedS: 5, firstStopAtM: 1505 });
    expect(summariseStops(course, 140_000, 170_000, 1400, 1600)).toMatchObject({ stops: 1, firstStopAtM: 1500 });
  });

  it("says that a stop was inferred, and that steps were long enough to hide one", () => {
    const filled = createCourse(16);
    fillGaps(courseOf([[0, 0, 36], [40, 200, 36]], 10), [150], filled);
    const seen = summariseStops(filled, 0, 40_000, 0, 300);
    expect(seen).toMatchObject({ stops: 1, inferred: true, hasLongSteps: true });
  });

  it("gives no place to a stop that kinematics cannot place", () => {
    const filled = createCourse(16);
    fillGaps(courseOf([[0, 0, 36], [60, 400, 36]], 10), [390], filled);
    expect(filled.kind.slice(0, filled.length)).toContain(KNOTS.unplaced);
    expect(summariseStops(filled, 0, 60_000, 0, 500).firstStopAtM).toBeNaN();
  });
});
