import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { legQuarters } from "@/core/queues/leg-quarters";
import { QUARTER_MS } from "@/core/queues/options";
import { buildScreenDays } from "@/core/scores/build-screen-days";
import { mergeScreenDays } from "@/core/scores/merge-screen-days";
import { decodeScreenDay, encodeScreenDay } from "@/core/scores/screen-day-codec";
import { delayCode, delayOfCode } from "@/core/scores/stored-figures";
import type { ScreenDay, ScreenScores } from "@/core/scores/types";
import { oneLeg, passing, stopping, traversalsOf, type TestCourse } from "../queues/one-leg";
import { ALL_DAY, passagesOf, scoreDays } from "./small-city";

const UTC = [{ fromMs: 0, offsetMin: 0 }];
const START = Date.UTC(2026, 5, 1, 6);
const CATALOGUE = { movements: [{ key: 5, leg: 7, junction: 1, turn: "through" as const }], legs: [{ key: 7, junction: 1, storageM: 300 }] };

/** Vehicles of two days, each at its own moment, some stopping; delays in thirds of a second, which slices round. */
const courses = fc.array(
  fc
    .record({ minute: fc.integer({ min: 0, max: 2 * 1440 - 400 }), standM: fc.integer({ min: 0, max: 150 }), standS: fc.integer({ min: 0, max: 60 }), thirds: fc.integer({ min: -10, max: 400 }) })
    .map(({ minute, standM, standS, thirds }): TestCourse => {
      const enterMs = START + minute * 60_000;
      const course = standS > 5 ? stopping(enterMs, standM, standS) : passing(enterMs);
      return { ...course, delayS: thirds / 3, stops: standS > 5 ? 1 : 0 };
    }),
  { minLength: 1, maxLength: 30 },
);

function daysOf(all: TestCourse[], localTime = UTC): ScreenDay[] {
  const traversals = traversalsOf(all);
  const vehicle = Uint32Array.from({ length: all.length }, (_, i) => 1000 + (all[i].vehicle ?? i));
  return buildScreenDays({ ...traversals, vehicle: Uint32Array.from(all, (_, i) => i) }, legQuarters(oneLeg(), traversals), { movement: [5], leg: [7], vehicle }, localTime);
}

/** What slices say of their traversals, whatever their order. */
function passages(days: ScreenDay[]): string[] {
  return days.flatMap((day) => passagesOf(day).map((p) => [day.day, ...Object.values(p)].join(" "))).sort();
}

/** All that was scored. */
function everything({ junctions, movement, leg, traversals }: ScreenScores) {
  return { junctions, movement: movement(5), leg: leg(7), traversals };
}

function mergeByDay(slices: ScreenDay[]): ScreenDay[] {
  const days = [...new Set(slices.map((slice) => slice.day))].sort((a, b) => a - b);
  return days.map((day) => mergeScreenDays(slices.filter((slice) => slice.day === day)));
}

describe("slices of a screen", () => {
  it("are the same whether a file is whole, split anywhere, or its parts overlap", () => {
    fc.assert(
      fc.property(courses, fc.nat(30), fc.nat(30), (all, a, b) => {
        const named = all.map((course, vehicle) => ({ ...course, vehicle }));
        const [cut, overlap] = [Math.min(a, b), Math.max(a, b)];
        const parts = [...daysOf(named.slice(0, overlap)), ...daysOf(named.slice(cut))];
        expect(passages(mergeByDay(parts))).toEqual(passages(daysOf(named)));
      }),
      { numRuns: 60 },
    );
  });

  it("hold every traversal once and come back from their bytes", () => {
    fc.assert(
      fc.property(courses, (all) => {
        const days = daysOf(all);
        expect(days.reduce((sum, day) => sum + day.delay.length, 0)).toBe(all.length);
        expect(days.map((day) => decodeScreenDay(encodeScreenDay(day)))).toEqual(days);
      }),
      { numRuns: 40 },
    );
  });

  it("score the same when the city's clock and all timestamps move together", () => {
    fc.assert(
      fc.property(courses, fc.integer({ min: -48, max: 56 }), (all, quarters) => {
        const moved = all.map((course) => ({ ...course, enterMs: course.enterMs + quarters * QUARTER_MS }));
        const here = scoreDays(daysOf(all), CATALOGUE, ALL_DAY);
        const there = scoreDays(daysOf(moved, [{ fromMs: 0, offsetMin: -15 * quarters }]), CATALOGUE, ALL_DAY);
        expect(everything(there)).toEqual(everything(here));
      }),
      { numRuns: 40 },
    );
  });

  it("have a mean between the least and the greatest delay, inside its interval", () => {
    fc.assert(
      fc.property(courses, (all) => {
        const [junction] = scoreDays(daysOf(all), CATALOGUE, ALL_DAY).junctions;
        const delays = all.map((course) => delayOfCode(delayCode(course.delayS ?? 0)));
        expect(junction.vehicles).toBe(all.length);
        expect(junction.delay.value).toBeGreaterThanOrEqual(Math.min(...delays) - 1e-4);
        expect(junction.delay.value).toBeLessThanOrEqual(Math.max(...delays) + 1e-4);
        expect(junction.delay.low).toBeLessThan(junction.delay.value);
        expect(junction.delay.high).toBeGreaterThan(junction.delay.value);
        expect(junction.spill.value >= 0 || Number.isNaN(junction.spill.value)).toBe(true);
      }),
      { numRuns: 60 },
    );
  });
});

describe("queues", () => {
  it("never reach farther by estimate than the storage, nor less than what was seen", () => {
    fc.assert(
      fc.property(courses, fc.integer({ min: 40, max: 400 }), (all, storageM) => {
        const q = legQuarters(oneLeg(storageM), traversalsOf(all));
        for (let k = 0; k < q.length; k++) {
          expect(q.reachEstimateM[k]).toBeGreaterThanOrEqual(q.reachM[k]);
          expect(q.reachEstimateM[k]).toBeLessThanOrEqual(storageM);
          expect(q.spilledS[k]).toBeLessThanOrEqual(q.observedS[k]);
          expect(q.observedS[k]).toBeGreaterThan(0);
          expect(q.observedS[k]).toBeLessThanOrEqual(900);
        }
      }),
      { numRuns: 60 },
    );
  });
});
