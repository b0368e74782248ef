import { describe, expect, it } from "vitest";
import { createCourse, type Course } from "@/core/traversals/course";
import { summariseStops } from "@/core/traversals/stops";

function courseOf(rows: [seconds: number, distance: number, kmh: number][]): Course {
  const course = createCourse(rows.length);
  course.length = rows.length;
  rows.forEach(([s, d, kmh], i) => {
    course.tMs[i] = s * 1000;
    course.distanceM[i] = d;
    course.speedMs[i] = kmh / 3.6;
  });
  return course;
}

describe("stops", () => {
  it("counts one stop while the vehicle only creeps: below 5 km/h until above 10 km/h", () => {
    const course = courseOf([[0, 0, 40], [5, 40, 4], [10, 42, 8], [15, 48, 3], [20, 50, 12], [25, 90, 40]]);
    const seen = summariseStops(course, 0, 25_000, 14, 0, 200);
    expect(seen.stops).toBe(1);
    expect(seen.firstStopAtM).toBe(40);
    expect(seen.inferred).toBe(false);
    expect(seen.hasLongSteps).toBe(false);
  });

  it("counts a second stop after 10 km/h was passed", () => {
    const course = courseOf([[0, 0, 40], [5, 40, 0], [10, 60, 20], [15, 90, 0], [20, 110, 30]]);
    expect(summariseStops(course, 0, 20_000, 14, 0, 200).stops).toBe(2);
  });

  // 200 m at 10 m/s are 20 s; braking and speeding up lose 10 / 5.2 + 10 / 3.8 = 4.55 s; 40 s leave 15.45 s of standing.
  it("infers a stop between pings that the time cannot explain otherwise", () => {
    const seen = summariseStops(courseOf([[0, 0, 36], [40, 200, 36]]), 0, 40_000, 10, 0, 300);
    expect(seen.stops).toBe(1);
    expect(seen.inferred).toBe(true);
    expect(seen.stoppedS).toBeCloseTo(15.445, 2);
    expect(seen.firstStopAtM).toBeNaN();
  });

  it("infers none where slow driving explains the time", () => {
    const seen = summariseStops(courseOf([[0, 0, 36], [24, 200, 36]]), 0, 24_000, 10, 0, 300);
    expect(seen.stops).toBe(0);
    expect(seen.hasLongSteps).toBe(true);
  });

  it("counts only between the two times and places only on the stretch", () => {
    const course = courseOf([[0, 0, 0], [5, 0, 0], [10, 50, 40], [15, 100, 0], [20, 150, 40]]);
    const seen = summariseStops(course, 10_000, 20_000, 14, 90, 200);
    expect(seen.stops).toBe(1);
    expect(seen.firstStopAtM).toBe(100);
  });
});
