import { describe, expect, it } from "vitest";
import { QUARTER_MS } from "@/core/queues/options";
import { buildScreenDays } from "@/core/scores/build-screen-days";
import { localQuarter } from "@/core/scores/local-time";
import { mergeScreenDays } from "@/core/scores/merge-screen-days";
import { decodeScreenDay, encodeScreenDay } from "@/core/scores/screen-day-codec";
import type { LegQuarters } from "@/core/types";
import { seededRandom } from "@/core/stats/random";
import { keepInScreenDay } from "@/core/scores/leave-out";
import { reachOfCode, secondsOfCode } from "@/core/scores/stored-figures";
import type { ScreenDay } from "@/core/scores/types";
import { traversalsOf } from "../queues/one-leg";
import { passagesOf, screenDay } from "./small-city";

/** Azores: one hour behind UTC, on it from the last Sunday of March (2026-03-29 01:00 UTC) to that of October. */
const AZORES = [
  { fromMs: Date.UTC(2026, 0, 1), offsetMin: -60 },
  { fromMs: Date.UTC(2026, 2, 29, 1), offsetMin: 0 },
  { fromMs: Date.UTC(2026, 9, 25, 1), offsetMin: -60 },
];
/** What a slice says of queues, in plain units. */
function queuesOf(day: ScreenDay) {
  return Array.from(day.leg).flatMap((leg, row) =>
    Array.from({ length: day.legStart[row + 1] - day.legStart[row] }, (_, i) => {
      const k = day.legStart[row] + i;
      return { leg, quarter: day.legQuarter[k], reachM: reachOfCode(day.reach[k]), spilledS: secondsOfCode(day.spilled[k]), observedS: secondsOfCode(day.observed[k]) };
    }),
  );
}

const dayOf = (year: number, month: number, date: number): number => Date.UTC(year, month, date) / 86_400_000;

describe("localQuarter", () => {
  it.each([
    ["winter, before midnight", Date.UTC(2026, 0, 6, 0, 30), dayOf(2026, 0, 5), 94],
    ["winter, morning", Date.UTC(2026, 0, 6, 9, 15), dayOf(2026, 0, 6), 33],
    ["summer", Date.UTC(2026, 6, 6, 8, 14, 59), dayOf(2026, 6, 6), 32],
    ["the last moment before the spring change", Date.UTC(2026, 2, 29, 0, 59, 59), dayOf(2026, 2, 28), 95],
    ["the first moment after it", Date.UTC(2026, 2, 29, 1), dayOf(2026, 2, 29), 4],
    ["before the table begins", Date.UTC(2025, 11, 31, 12), dayOf(2025, 11, 31), 44],
    ["before 1970", Date.UTC(1969, 11, 31, 12), -1, 44],
  ])("in %s", (_, tMs, day, quarter) => expect(localQuarter(tMs, AZORES)).toEqual({ day, quarter }));

  it("meets the quarters of the hour that autumn repeats twice", () => {
    const first = localQuarter(Date.UTC(2026, 9, 25, 0, 30), AZORES);
    expect(localQuarter(Date.UTC(2026, 9, 25, 1, 30), AZORES)).toEqual(first);
  });

  it("refuses an empty table", () => expect(() => localQuarter(0, [])).toThrow(RangeError));
});

describe("buildScreenDays", () => {
  const keys = { movement: [71, 70], leg: [50], vehicle: [900, 901, 902] };
  const noQueues: LegQuarters = {
    length: 0, leg: new Uint32Array(), startMs: new Float64Array(), reachM: new Float32Array(), reachEstimateM: new Float32Array(),
    spilledS: new Float32Array(), observedS: new Float32Array(),
  };
  const at = (stopLineMs: number, movement: number, vehicle: number, delayS: number, stops = 0) => ({
    enterMs: stopLineMs - 20_000, points: [[0, 250], [20, -15]] as [number, number][], movement, vehicle, delayS, stops,
  });

  it("puts a traversal where it passes the stop line, by the local clock", () => {
    // Winter: local midnight is 01:00 UTC. The second enters the leg before midnight and passes the line after it.
    const midnight = Date.UTC(2026, 0, 6, 1);
    const days = buildScreenDays(
      traversalsOf([at(midnight - 1000, 0, 0, 5), at(midnight + 1000, 1, 1, 7, 1), at(midnight + 2000, 0, 2, 9), at(midnight + 3000, 1, 0, 11)]),
      noQueues,
      keys,
      AZORES,
    );
    expect(days.map((d) => d.day)).toEqual([dayOf(2026, 0, 5), dayOf(2026, 0, 6)]);
    expect(passagesOf(days[0])).toEqual([{ movement: 71, quarter: 95, delayS: 5, vehicle: 900, stops: 0 }]);
    expect(passagesOf(days[1])).toEqual([
      { movement: 70, quarter: 0, delayS: 11, vehicle: 900, stops: 0 },
      { movement: 70, quarter: 0, delayS: 7, vehicle: 901, stops: 1 },
      { movement: 71, quarter: 0, delayS: 9, vehicle: 902, stops: 0 },
    ]);
  });

  it("joins both passes of a repeated quarter into one entry of the leg", () => {
    const first = Date.UTC(2026, 9, 25, 0, 30);
    const queues: LegQuarters = {
      length: 2, leg: Uint32Array.of(0, 0), startMs: Float64Array.of(first, first + 4 * QUARTER_MS), reachM: Float32Array.of(40, 90),
      reachEstimateM: Float32Array.of(50, 95), spilledS: Float32Array.of(0, 60), observedS: Float32Array.of(600, 900),
    };
    const [day] = buildScreenDays(traversalsOf([]), queues, keys, AZORES);
    expect(queuesOf(day)).toEqual([{ leg: 50, quarter: 2, reachM: 90, spilledS: 60, observedS: 1500 }]);
    expect(reachOfCode(day.reachEstimate[0])).toBe(95);
  });

  it("makes nothing of nothing", () => expect(buildScreenDays(traversalsOf([]), noQueues, keys, AZORES)).toEqual([]));
});

describe("a slice as bytes", () => {
  const day = screenDay(
    20_700,
    [{ movement: 7, delayS: 12.5, stops: 1 }, { movement: 7, delayS: -1, quarter: 33 }, { movement: 9, delayS: 80, stops: 3 }],
    [{ leg: 4, reachM: 35, reachEstimateM: 48, spilledS: NaN, observedS: 640 }],
  );

  it("comes back as it was", () => expect(decodeScreenDay(encodeScreenDay(day))).toEqual(day));

  it("comes back from any place in a buffer", () => {
    const bytes = encodeScreenDay(day);
    const shifted = new Uint8Array(bytes.length + 3);
    shifted.set(bytes, 3);
    expect(decodeScreenDay(shifted.subarray(3))).toEqual(day);
    const padded = new Uint8Array(bytes.length + 8);
    padded.set(bytes, 4);
    expect(decodeScreenDay(padded.subarray(4, 4 + bytes.length))).toEqual(day);
  });

  it("takes days before 1970 and empty slices", () => {
    const empty = screenDay(-3, []);
    expect(decodeScreenDay(encodeScreenDay(empty))).toEqual(empty);
  });

  it("refuses what is no slice, another version, or cut short", () => {
    const bytes = encodeScreenDay(day);
    expect(() => decodeScreenDay(bytes.subarray(0, 20))).toThrow("Not a screen day: 20 bytes are less than its header.");
    expect(() => decodeScreenDay(bytes.subarray(0, bytes.length - 1))).toThrow(`Screen day of ${bytes.length - 1} bytes, expected ${bytes.length}.`);
    expect(() => decodeScreenDay(new Uint8Array(64))).toThrow("Not a screen day.");
    bytes[4] = 9;
    expect(() => decodeScreenDay(bytes)).toThrow("Screen day of version 9, expected 2.");
  });
});

describe("mergeScreenDays", () => {
  const early = screenDay(
    5,
    [{ movement: 1, delayS: 10, vehicle: 1 }, { movement: 1, delayS: 20, vehicle: 2 }],
    [{ leg: 3, reachM: 40, observedS: 300 }, { leg: 4, reachM: NaN, spilledS: NaN, observedS: 100 }],
  );
  const late = screenDay(
    5,
    [{ movement: 1, delayS: 20, vehicle: 2, stops: 1 }, { movement: 1, delayS: 20, vehicle: 3 }, { movement: 2, delayS: 5, vehicle: 2, quarter: 30 }],
    [{ leg: 3, reachM: 25, spilledS: 30, observedS: 900 }, { leg: 4, reachM: 7, spilledS: NaN, observedS: 50 }, { leg: 8, quarter: 31, reachM: 10 }],
  );
  const third = screenDay(5, [{ movement: 1, delayS: 20, vehicle: 3 }, { movement: 1, delayS: 20, vehicle: 3 }, { movement: 3, delayS: 1, vehicle: 9 }]);

  it("counts a traversal that is in both slices once", () => {
    expect(passagesOf(mergeScreenDays([early, late]))).toEqual([
      { movement: 1, quarter: 32, delayS: 10, vehicle: 1, stops: 0 },
      { movement: 1, quarter: 32, delayS: 20, vehicle: 2, stops: 1 },
      { movement: 1, quarter: 32, delayS: 20, vehicle: 3, stops: 0 },
      { movement: 2, quarter: 30, delayS: 5, vehicle: 2, stops: 0 },
    ]);
  });

  it("keeps the farthest reach and the longest observation of a leg", () => {
    expect(queuesOf(mergeScreenDays([early, late]))).toEqual([
      { leg: 3, quarter: 32, reachM: 40, spilledS: 30, observedS: 900 },
      { leg: 4, quarter: 32, reachM: 7, spilledS: NaN, observedS: 100 },
      { leg: 8, quarter: 31, reachM: 10, spilledS: 0, observedS: 900 },
    ]);
  });

  it("does not mind the order or grouping of slices, nor one given twice", () => {
    const merged = mergeScreenDays([early, late, third]);
    expect(merged.delay.length).toBe(6);
    const others = [[third, late, early], [late, third, early, third], [mergeScreenDays([third, early]), late], [merged, late], [early, mergeScreenDays([late, third])]];
    for (const slices of others) expect(mergeScreenDays(slices)).toEqual(merged);
  });

  it("gives the same whatever parts the traversals of a day are dealt into", () => {
    const random = seededRandom(3);
    const all = Array.from({ length: 400 }, (_, vehicle) => ({
      movement: 1 + Math.floor(6 * random()), quarter: Math.floor(96 * random()), delayS: Math.round(900 * random()) / 10, vehicle, stops: Math.floor(3 * random()),
    }));
    const whole = screenDay(7, all);
    for (const parts of [2, 5, 24]) {
      const dealt = Array.from({ length: parts }, (_, part) => screenDay(7, all.filter((_, i) => Math.floor((i * 7919) % parts) === part)));
      expect(mergeScreenDays(dealt)).toEqual(whole);
    }
  });

  it("refuses slices of different days or methods", () => {
    expect(() => mergeScreenDays([early, { ...late, day: 6 }])).toThrow("Slices of different days, 5 and 6, cannot be merged.");
    expect(() => mergeScreenDays([early, { ...late, methodVersion: 0 }])).toThrow(RangeError);
    expect(() => mergeScreenDays([])).toThrow(RangeError);
  });
});

describe("keepInScreenDay", () => {
  const day = screenDay(
    5,
    [{ movement: 1, delayS: 10 }, { movement: 2, delayS: 20, quarter: 40 }, { movement: 2, delayS: 30 }, { movement: 3, delayS: 40 }],
    [{ leg: 7, reachM: 40 }, { leg: 8, reachM: 50 }, { leg: 8, quarter: 33, reachM: 60 }],
  );

  it("leaves out the other movements and legs, and nothing else", () => {
    const kept = keepInScreenDay(day, (key) => key !== 2, (key) => key === 8);
    expect(passagesOf(kept)).toEqual(passagesOf(day).filter(({ movement }) => movement !== 2));
    expect(queuesOf(kept)).toEqual(queuesOf(day).filter(({ leg }) => leg === 8));
    expect(keepInScreenDay(day, () => true, () => true)).toEqual(day);
  });
});
