import { describe, expect, it } from "vitest";
import { legQuarters } from "@/core/queues/leg-quarters";
import { QUARTER_MS } from "@/core/queues/options";
import { scoreProfile } from "@/core/scores/score-profile";
import { screenRows } from "@/core/scores/screen-rows";
import { oneLeg, passing, stopping, traversalsOf } from "../queues/one-leg";
import { daysByJunction, screenDay } from "./small-city";

describe("scoreProfile", () => {
  const days = [
    screenDay(1, [{ movement: 1, delayS: 10 }, { movement: 2, delayS: 20 }, { movement: 3, delayS: 500 }, { movement: 1, delayS: 40, quarter: 33 }], [
      { leg: 9, reachM: 50, spilledS: 90 },
      { leg: 8, reachM: 400 },
    ]),
    screenDay(2, [{ movement: 1, delayS: 30 }], [{ leg: 9, reachM: 70, observedS: 900 }]),
  ];

  const catalogue = {
    movements: [1, 2, 3].map((key) => ({ key, leg: key === 3 ? 8 : 9, junction: 4, turn: "through" as const })),
    legs: [8, 9].map((key) => ({ key, junction: 4, storageM: 200 })),
  };

  it("has 96 quarters with the mean over days of the chosen movements, and their queues", () => {
    const profile = scoreProfile(daysByJunction(days, catalogue), { movements: [1, 2], legs: [9] });
    expect(profile.map((p) => p.quarter)).toEqual(Array.from({ length: 96 }, (_, q) => q));
    expect(profile[32]).toMatchObject({ vehicles: 3, days: 2, reachP95M: expect.closeTo(69, 6) });
    expect(profile[32].delay.value).toBe(20);
    expect(profile[32].delay.low).toBeLessThan(20);
    expect(profile[32].spill.value).toBeCloseTo(0.05, 12);
    expect(profile[33].delay.value).toBe(40);
    expect(profile[33].reachP95M).toBeNaN();
  });

  it("says nothing of quarters that nobody passed", () => {
    expect(scoreProfile([], { movements: [1], legs: [9] })[10]).toEqual({
      quarter: 10, vehicles: 0, days: 0, delay: { value: NaN, low: NaN, high: NaN }, reachP95M: NaN, spill: { value: NaN, low: NaN, high: NaN },
    });
  });
});

describe("screenRows", () => {
  const start = 2000 * QUARTER_MS;
  const network = oneLeg(300);
  // A second exit of the same turn: both make one row.
  network.exits.push({ ...network.exits[0], id: "J1-s2" });
  network.movements.push({ ...network.movements[0], id: "J1-N>J1-s2", exit: 1 });
  const traversals = traversalsOf([
    { ...stopping(start + 60_000, 40, 30), delayS: 30, stops: 1 },
    { ...passing(start + 200_000), delayS: 2, movement: 1 },
    { ...stopping(start + QUARTER_MS + 60_000, 10, 20), delayS: 25, stops: 2 },
  ]);
  const rows = screenRows(network, traversals, legQuarters(network, traversals));

  it("has one row for the whole time and one for each quarter", () => {
    expect(rows.map((r) => r.startMs)).toEqual([null, start, start + QUARTER_MS]);
    expect(rows[0]).toMatchObject({ junction: 0, leg: 0, approachBearingDeg: 180, turn: "through", vehicles: 3, meanDelayS: 19, p95DelayS: NaN });
    expect(rows[0].stopShare).toBeCloseTo(2 / 3, 12);
    expect(rows[0].stopsPerVehicle).toBe(1);
    expect(rows[1]).toMatchObject({ vehicles: 2, meanDelayS: 16, stopShare: 0.5, spillbackShare: 0 });
    expect(rows[2]).toMatchObject({ vehicles: 1, meanDelayS: 25, stopsPerVehicle: 2 });
  });

  it("gives the leg's queue, the longest for the whole time, the unseen tail estimated", () => {
    expect(rows[1].queueReachM).toBeGreaterThanOrEqual(40);
    expect(rows[2].queueReachM).toBeGreaterThanOrEqual(10);
    expect(rows[0].queueReachM).toBe(Math.max(rows[1].queueReachM, rows[2].queueReachM));
  });

  it("leaves spillback open where the storage is unknown", () => {
    const open = oneLeg(NaN);
    const one = traversalsOf([stopping(start, 40, 30)]);
    expect(screenRows(open, one, legQuarters(open, one))[0].spillbackShare).toBeNaN();
  });

  it("gives a 95th percentile from twenty vehicles on", () => {
    const twenty = traversalsOf(Array.from({ length: 20 }, (_, i) => ({ ...passing(start + i * 20_000), delayS: i })));
    const [all] = screenRows(oneLeg(), twenty, legQuarters(oneLeg(), twenty));
    // Type 7: h = 19 × 0.95 = 18.05.
    expect(all.p95DelayS).toBeCloseTo(18.05, 5);
  });
});
