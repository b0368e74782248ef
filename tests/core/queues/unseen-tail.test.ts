import { describe, expect, it } from "vitest";
import { legQuarters } from "@/core/queues/leg-quarters";
import { DEFAULT_QUEUE_OPTIONS, QUARTER_MS } from "@/core/queues/options";
import { findStandings } from "@/core/queues/standings";
import { columnOptions, expectedBehindM, longestBehindM, tailGrowthMs } from "@/core/queues/unseen-tail";
import { oneLeg, passing, stopping, traversalsOf } from "./one-leg";

const START = 1000 * QUARTER_MS;

describe("the unseen end of a queue", () => {
  it("grows by arrivals over density, less what is seen itself", () => {
    // 0.02 a second at 0.025 a metre: 0.8 m/s; of 7.62 m 0.1905 vehicles are seen.
    expect(tailGrowthMs(0.02, 0.025, DEFAULT_QUEUE_OPTIONS)).toBeCloseTo(0.8 * (1 - 0.1905), 9);
    expect(tailGrowthMs(0.02, NaN, DEFAULT_QUEUE_OPTIONS)).toBe(0);
  });

  it("is behind the vehicle from when it joined until the discharge of 5 m/s has passed it", () => {
    const found = findStandings(oneLeg(), traversalsOf([stopping(START, 40, 40)]), DEFAULT_QUEUE_OPTIONS);
    const at = (afterMs: number, mostM = 100): number => expectedBehindM(found, 0, found.joinedMs[0] + afterMs, 0.5, mostM, DEFAULT_QUEUE_OPTIONS);
    expect(at(30_000)).toBeCloseTo(15, 5);
    expect(at(30_000, 10)).toBe(10);
    const stoodMs = found.toMs[0] - found.fromMs[0];
    expect(at(stoodMs + 2000)).toBeCloseTo((stoodMs + 2000) / 2000, 5);
    expect(at(stoodMs + 10_000)).toBeNaN();
  });

  it("is longer at times by one standard deviation of a count in two lanes, never than what may be free", () => {
    // 30.48 m in two lanes of 7.62 m are 8 vehicles: sqrt(8) = 2.83 more, two of which take 7.62 m.
    expect(longestBehindM(30.48, 200, DEFAULT_QUEUE_OPTIONS)).toBeCloseTo(30.48 + (Math.sqrt(8) * 7.62) / 2, 9);
    expect(longestBehindM(30.48, 32, DEFAULT_QUEUE_OPTIONS)).toBe(32);
    expect(longestBehindM(0, 200, DEFAULT_QUEUE_OPTIONS)).toBe(0);
  });

  it("may be as far off as chance leaves between seen vehicles, 99 times in 100", () => {
    const widest = (perMetre: number) => columnOptions(DEFAULT_QUEUE_OPTIONS, perMetre);
    // One seen vehicle in 14 m: 4.605 x 14 = 64.5 m. In 100 m: more than the limits. All vehicles of one lane, one in 7.62 m: the least gap.
    expect(widest(1 / 14).gapM).toBeCloseTo(64.5, 1);
    expect(widest(1 / 14).headM).toBeCloseTo(64.5, 1);
    expect(widest(1 / 100)).toMatchObject({ gapM: 120, headM: 100 });
    expect(widest(1 / 7.62)).toMatchObject({ gapM: 40, headM: 60 });
    expect(columnOptions(DEFAULT_QUEUE_OPTIONS, NaN)).toBe(DEFAULT_QUEUE_OPTIONS);
  });

  it("is no more than expected where hardly anybody else was seen", () => {
    const two = [stopping(START, 8, 40), stopping(START + 5000, 60, 40)];
    const few = legQuarters(oneLeg(), traversalsOf(two)).reachEstimateM[0];
    const many = legQuarters(oneLeg(), traversalsOf([...two, ...[1, 2, 3, 4, 5].map((k) => passing(START + k * 120_000))])).reachEstimateM[0];
    expect(few).toBeGreaterThan(60);
    expect(few).toBeLessThan(65);
    expect(many).toBeGreaterThan(few + 5);
  });
});
