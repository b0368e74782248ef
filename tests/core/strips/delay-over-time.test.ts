import { describe, expect, it } from "vitest";
import { scoreProfile } from "@/core/scores/score-profile";
import { delayOverTime } from "@/core/strips/delay-over-time";
import { crossingTimes } from "@/core/strips/track-crossings";
import { daysByJunction, screenDay } from "../scores/small-city";
import { setOf, type ToyTrack } from "./support";

const passing = (day: number, crossS: number, delayS: number): ToyTrack => ({
  day,
  delayS,
  points: [[crossS - 31.5, 300], [crossS, -15], [crossS + 4.5, -60]],
});

describe("crossing times", () => {
  it("finds the moment on the virtual line between two points", () => {
    // From 85 to -115 m in 20 s: -15 m after half of it.
    expect([...crossingTimes(setOf([{ points: [[90, 250], [100, 85], [120, -115]] }]))]).toEqual([110]);
  });

  it("takes the last point of a track that ends before the line, and NaN of no track", () => {
    expect([...crossingTimes(setOf([{ points: [[0, 100], [9, 4]] }, { points: [] }]))]).toEqual([9, NaN]);
  });
});

describe("delay over time", () => {
  it("averages the vehicles of each step and leaves out those not included", () => {
    const set = setOf([passing(1, 3610, 10), passing(1, 3650, 30), passing(2, 3660, 80), passing(2, 4600, 12)]);
    const delay = delayOverTime(set, crossingTimes(set), 3600, 5400, 900, Uint8Array.of(1, 1, 0, 1));
    expect([...delay.vehicles]).toEqual([2, 1]);
    expect([...delay.meanS]).toEqual([20, 12]);
    expect(delay.lowS[0]).toBeLessThan(20);
  });

  it("gives the figures of the day profile in quarters of an hour", () => {
    const delays = [[12, 40, 3], [55, 9, 21], [30, 31, 18]];
    const set = setOf(delays.flatMap((ofDay, day) => ofDay.map((delay, k) => passing(day + 1, 8 * 3600 + 50 + 200 * k, delay))));
    const days = delays.map((ofDay, day) => screenDay(day + 1, ofDay.map((delayS) => ({ movement: 1, delayS }))));
    const catalogue = { movements: [{ key: 1, leg: 2, junction: 3, turn: "through" as const }], legs: [{ key: 2, junction: 3, storageM: 200 }] };
    const stored = scoreProfile(daysByJunction(days, catalogue), { movements: [1], legs: [] })[32].delay;
    const read = delayOverTime(set, crossingTimes(set), 8 * 3600, 8 * 3600 + 900, 900);
    expect(read.meanS[0]).toBeCloseTo(stored.value, 6);
    expect(read.lowS[0]).toBeCloseTo(stored.low, 6);
    expect(read.highS[0]).toBeCloseTo(stored.high, 6);
  });
});
