import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { createCourse, smoothForward, timeAt, type Course } from "@/core/traversals/course";

function courseOf(seconds: number[], distances: number[], speeds?: number[]): Course {
  const course = createCourse(seconds.length);
  course.length = seconds.length;
  seconds.forEach((s, i) => {
    course.tMs[i] = s * 1000;
    course.distanceM[i] = distances[i];
    course.speedMs[i] = speeds ? speeds[i] : NaN;
  });
  return course;
}

describe("course", () => {
  it("pools a standing vehicle's noise into one place", () => {
    const course = courseOf([0, 1, 2, 3, 4], [0, 12, 8, 10, 30]);
    smoothForward(course);
    expect([...course.distanceM]).toEqual([0, 10, 10, 10, 30]);
  });

  it("interpolates linearly without speeds", () => {
    expect(timeAt(courseOf([0, 10], [0, 100]), 25)).toBeCloseTo(2500, 3);
  });

  it("follows constant braking exactly: from 20 m/s to a stand in 10 s is 100 m, half of the time 75 m", () => {
    const course = courseOf([0, 10], [0, 100], [20, 0]);
    expect(timeAt(course, 75)).toBeCloseTo(5000, 2);
    expect(timeAt(course, 36)).toBeCloseTo(2000, 2);
  });

  it("gives the end of a wait for the place of the wait, and nothing outside", () => {
    const course = courseOf([0, 10, 40, 50], [0, 50, 50, 150]);
    expect(timeAt(course, 50)).toBe(40_000);
    expect(timeAt(course, -1)).toBeNaN();
    expect(timeAt(course, 151)).toBeNaN();
  });

  it("passes growing distances at growing times, between the pings around them", () => {
    fc.assert(
      fc.property(
        fc.array(fc.record({ dt: fc.integer({ min: 1, max: 30 }), dx: fc.integer({ min: 0, max: 400 }), v: fc.integer({ min: 0, max: 25 }) }), { minLength: 2, maxLength: 12 }),
        (steps) => {
          let t = 0;
          let d = 0;
          const rows = steps.map((step) => ({ t: (t += step.dt), d: (d += step.dx), v: step.v }));
          const course = courseOf(rows.map((r) => r.t), rows.map((r) => r.d), rows.map((r) => r.v));
          let last = -Infinity;
          for (let at = rows[0].d; at <= d; at += 7) {
            const now = timeAt(course, at);
            expect(now).toBeGreaterThanOrEqual(last);
            expect(now).toBeGreaterThanOrEqual(rows[0].t * 1000);
            expect(now).toBeLessThanOrEqual(t * 1000);
            last = now;
          }
        },
      ),
    );
  });

  // Trapezoid trajectory: control delay = S + v / (2 a_d) + v / (2 a_a); braking 79.059 m, speeding up 90.142 m.
  it("finds the control delay of a trapezoid trajectory to the millisecond at 1 s pings", () => {
    const v = 13.889;
    const brake = 1.22;
    const speedUp = 1.07;
    const stand = 30;
    const t1 = (250 - 79.059148) / v;
    const t2 = t1 + v / brake;
    const t3 = t2 + stand;
    const t4 = t3 + v / speedUp;
    const at = (t: number): [number, number] => {
      if (t < t1) return [v * t, v];
      if (t < t2) return [v * t - (brake * (t - t1) ** 2) / 2, v - brake * (t - t1)];
      if (t < t3) return [250, 0];
      if (t < t4) return [250 + (speedUp * (t - t3) ** 2) / 2, speedUp * (t - t3)];
      return [250 + 90.142207 + v * (t - t4), v];
    };
    const seconds = Array.from({ length: 90 }, (_, i) => i);
    const course = courseOf(seconds, seconds.map((t) => at(t)[0]), seconds.map((t) => at(t)[1]));
    const delay = (timeAt(course, 370) - timeAt(course, 0)) / 1000 - 370 / v;
    expect(delay).toBeCloseTo(42.1824, 2);
  });
});
