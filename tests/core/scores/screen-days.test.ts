import { describe, expect, it } from "vitest";
import { QUARTER_MS } from "@/core/queues/options";
import { buildScreenDays } from "@/core/scores/build-screen-days";
import { localQuarter } from "@/core/scores/local-time";
import { mergeScreenDays } from "@/core/scores/merge-screen-days";
import { decodeScreenDay, encodeScreenDay } from "@/core/scores/screen-day-codec";
import type { LegQuarters } from "@/core/types";
import { traversalsOf } from "../queues/one-leg";
import { screenDay } from "./small-city";

/** Azores: one hour behind UTC, on it from the last Sunday of March (2026-03-29 01:00 UTC) to that of October. */
const AZORES = [
  { fromMs: Date.UTC(2026, 0, 1), offsetMin: -60 },
  { fromMs: Date.UTC(2026, 2, 29, 1), offsetMin: 0 },
  { fromMs: Date.UTC(2026, 9, 25, 1), offsetMin: -60 },
];
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
    expect(days[0]).toMatchObject({ cells: 1, movement: Uint32Array.of(71), quarter: Uint8Array.of(95), delayS: Float32Array.of(5) });
    expect(days[1]).toMatchObject({
      cells: 2,
      movement: Uint32Array.of(70, 71),
      quarter: Uint8Array.of(0, 0),
      offset: Uint32Array.of(0, 2, 3),
      delayS: Float32Array.of(7, 11, 9),
      stops: Uint8Array.of(1, 0, 0),
      vehicle: Uint32Array.of(901, 900, 902),
    });
  });

  it("joins both passes of a repeated quarter into one entry of the leg", () => {
    const first = Date.UTC(2026, 9, 25, 0, 30);
    const queues: LegQuarters = {
      length: 2, leg: Uint32Array.of(0, 0), startMs: Float64Array.of(first, first + 4 * QUARTER_MS), reachM: Float32Array.of(40, 90),
      reachEstimateM: Float32Array.of(50, 95), spilledS: Float32Array.of(0, 60), observedS: Float32Array.of(600, 900),
    };
    const [day] = buildScreenDays(traversalsOf([]), queues, keys, AZORES);
    expect(day).toMatchObject({ legQuarters: 1, leg: Uint32Array.of(50), reachM: Float32Array.of(90), spilledS: Float32Array.of(60), observedS: Float32Array.of(1500) });
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
    expect(() => decodeScreenDay(bytes)).toThrow("Screen day of version 9, expected 1.");
  });
});

describe("mergeScreenDays", () => {
  const early = screenDay(5, [{ movement: 1, delayS: 10, vehicle: 1 }, { movement: 1, delayS: 20, vehicle: 2 }], [{ leg: 3, reachM: 40, observedS: 300 }]);
  const late = screenDay(
    5,
    [{ movement: 1, delayS: 20, vehicle: 2 }, { movement: 1, delayS: 20, vehicle: 3 }, { movement: 2, delayS: 5, vehicle: 2, quarter: 30 }],
    [{ leg: 3, reachM: 25, spilledS: 30, observedS: 900 }, { leg: 8, quarter: 31, reachM: 10 }],
  );

  it("counts a traversal that is in both slices once", () => {
    const merged = mergeScreenDays([early, late]);
    expect(merged).toMatchObject({
      movement: Uint32Array.of(2, 1),
      quarter: Uint8Array.of(30, 32),
      offset: Uint32Array.of(0, 1, 4),
      delayS: Float32Array.of(5, 10, 20, 20),
      vehicle: Uint32Array.of(2, 1, 2, 3),
    });
  });

  it("keeps the farthest reach and the longest observation of a leg", () => {
    expect(mergeScreenDays([early, late])).toMatchObject({
      leg: Uint32Array.of(8, 3), legQuarter: Uint8Array.of(31, 32), reachM: Float32Array.of(10, 40), spilledS: Float32Array.of(0, 30), observedS: Float32Array.of(900, 900),
    });
  });

  it("does not mind the order, nor a slice given twice", () => {
    const merged = mergeScreenDays([early, late]);
    expect(mergeScreenDays([late, early])).toEqual(merged);
    expect(mergeScreenDays([early, late, early])).toEqual(merged);
    expect(mergeScreenDays([merged, late])).toEqual(merged);
  });

  it("refuses slices of different days or methods", () => {
    expect(() => mergeScreenDays([early, { ...late, day: 6 }])).toThrow("Slices of different days, 5 and 6, cannot be merged.");
    expect(() => mergeScreenDays([early, { ...late, methodVersion: 0 }])).toThrow(RangeError);
    expect(() => mergeScreenDays([])).toThrow(RangeError);
  });
});
