import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { createCourse, timeAt, type Course } from "@/core/traversals/course";
import { fillGaps } from "@/core/traversals/fill-gaps";
import { KNOTS_A_STEP } from "@/core/traversals/share-wait";
import { courseOf } from "./courses";

function filled(from: Course, lines: number[] = []): { seconds: number; metres: number; ms: number }[] {
  const to = createCourse(from.length * KNOTS_A_STEP);
  fillGaps(from, lines, to);
  return Array.from({ length: to.length }, (_, i) => ({ seconds: to.tMs[i] / 1000, metres: to.distanceM[i], ms: to.speedMs[i] }));
}

describe("kinematics between pings", () => {
  // From a stand to 36 km/h at 1.9 m/s2: 5.263 s and 26.316 m; the other 173.684 m at 10 m/s take 17.368 s.
  it("finds when a standing vehicle set off", () => {
    const points = filled(courseOf([[0, 50, 0], [30, 250, 36]], 10));
    expect(points).toHaveLength(4);
    expect(points[1].seconds).toBeCloseTo(30 - 5.263 - 17.368, 2);
    expect(points[1]).toMatchObject({ metres: 50, ms: 0 });
    expect(points[2].metres).toBeCloseTo(50 + 26.316, 2);
  });

  // From 36 km/h to a stand at 2.6 m/s2: 3.846 s and 19.231 m.
  it("finds when a vehicle that now stands came to a stand", () => {
    const points = filled(courseOf([[0, 0, 36], [30, 100, 0]], 10));
    expect(points[2].seconds).toBeCloseTo((100 - 19.231) / 10 + 3.846, 2);
    expect(points[2]).toMatchObject({ metres: 100, ms: 0 });
  });

  // 200 m at 10 m/s are 20 s; braking and speeding up lose 1.923 + 2.632 = 4.555 s; 40 s leave 15.445 s of standing.
  it("finds a hidden stop and its length", () => {
    const points = filled(courseOf([[0, 0, 36], [40, 200, 36]], 10), [150]);
    const standing = points.filter((point) => point.ms === 0);
    expect(standing).toHaveLength(2);
    expect(standing[1].seconds - standing[0].seconds).toBeCloseTo(15.445, 2);
    expect(standing[0].metres).toBeLessThanOrEqual(154);
  });

  it("leaves steps alone that driving explains", () => {
    expect(filled(courseOf([[0, 0, 36], [21, 200, 36]], 10))).toHaveLength(2);
    expect(filled(courseOf([[0, 0, 0], [30, 0, 0]], 10))).toHaveLength(2);
    expect(filled(courseOf([[0, 0], [60, 100]], 10))).toHaveLength(2);
  });

  it("never turns time or distance back, and keeps every ping", () => {
    const step = fc.record({ dt: fc.integer({ min: 1, max: 60 }), dx: fc.integer({ min: 0, max: 700 }), kmh: fc.integer({ min: 0, max: 90 }) });
    fc.assert(
      fc.property(fc.array(step, { minLength: 2, maxLength: 10 }), fc.array(fc.integer({ min: 0, max: 3000 }), { maxLength: 5 }), (steps, lines) => {
        let s = 0;
        let d = 0;
        const rows = steps.map(({ dt, dx, kmh }): [number, number, number] => [(s += dt), (d += dx), kmh]);
        const points = filled(courseOf(rows), [...lines].sort((a, b) => a - b));
        for (let i = 1; i < points.length; i++) {
          expect(points[i].seconds).toBeGreaterThanOrEqual(points[i - 1].seconds);
          expect(points[i].metres).toBeGreaterThanOrEqual(points[i - 1].metres - 1e-9);
        }
        for (const [seconds, metres] of rows) expect(points.some((p) => p.seconds === seconds && p.metres === metres)).toBe(true);
      }),
    );
  });

  // A car stands 60 s from second 10 on at 200 m, 36 km/h before and after: the line at 300 m is passed at 70 + 2.632 + 10.
  it("passes a line behind a hidden stop at the right second, with pings 45 s apart", () => {
    const before: [number, number, number] = [0, 200 - 100 + 9.6, 36];
    const to = createCourse(32);
    fillGaps(courseOf([before, [45, 200, 0], [90, 200 + 26.316 + (90 - 75.263) * 10, 36]], 10), [210], to);
    expect(timeAt(to, 300) / 1000).toBeCloseTo(70 + 5.263 + (100 - 26.316) / 10, 0);
  });
});
