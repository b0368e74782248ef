import { describe, expect, it } from "vitest";
import {
  actuatedK,
  actuatedKMin,
  incrementalDelayS,
  initialQueueDelayS,
  progressionFactor,
  uniformDelayS,
  upstreamFiltering,
} from "@/core/models/hcm-delay";

describe("delay by the Highway Capacity Manual, 7th edition, Chapter 19", () => {
  // C 90 s, g 36 s, c 720 veh/h, T 0.25 h, k 0.5, I 1: evaluated from Eq. 19-19 and 19-26.
  it.each([
    [0.5, 20.25, 2.472823],
    [0.8, 23.823529411764707, 9.083269131959838],
    [0.95, 26.129032, 23.323292],
    [1, 27, 225 * Math.sqrt(4 / 180)],
    [1.1, 27, 64.258233],
  ])("of the base case at X = %d", (x, d1, d2) => {
    expect(uniformDelayS(90, 36, x)).toBeCloseTo(d1, 6);
    expect(incrementalDelayS(x, 720)).toBeCloseTo(d2, 6);
  });

  it("reproduces example problem 1 of Chapter 31, Exhibits 31-80 to 31-82", () => {
    // Northbound through: printed d1 25.9, d2 46.0 (from unrounded inputs); eastbound through: printed d1 29.6.
    expect(uniformDelayS(101.8, 50, 870 / 827)).toBeCloseTo(25.9, 3);
    expect(uniformDelayS(101.8, 30, 239 / 484)).toBeCloseTo(29.6326, 4);
    expect(incrementalDelayS(870 / 827, 827)).toBeCloseTo(45.864, 3);
  });

  it("varies d2 with k, I, c and T as Eq. 19-26 says", () => {
    expect(incrementalDelayS(0.8, 720, { k: 0.25 })).toBeCloseTo(4.749372, 6);
    expect(incrementalDelayS(0.8, 720, { filtering: 0.5 })).toBeCloseTo(4.749372, 6);
    expect(incrementalDelayS(0.8, 1440)).toBeCloseTo(4.749372, 6);
    expect(incrementalDelayS(0.8, 720, { hours: 1 })).toBeCloseTo(9.73666, 5);
  });

  // Eq. 19-20 and 19-21 at g/C 0.4, X 0.8; arrival types of Exhibit 19-13 by Rp.
  it.each([
    [0.4, 1],
    [0.6, 0.639316],
    [0.2, 1.367196],
    [1.33 * 0.4, 0.76088],
    [1.67 * 0.4, 0.51936],
    [0.67 * 0.4, 1.241866],
    [0.33 * 0.4, 1.492905],
  ])("has the progression factor for %d arriving on green", (share, pf) => {
    expect(progressionFactor(0.4, 0.8, share)).toBeCloseTo(pf, 6);
    expect(uniformDelayS(90, 36, 0.8, progressionFactor(0.4, 0.8, share))).toBeCloseTo(23.823529411764707 * pf, 4);
  });

  it("has the upstream filter and the k of actuated phases, Eq. 19-6, 19-22, 19-23", () => {
    expect([0.5, 0.8, 1].map(upstreamFiltering)).toEqual([expect.closeTo(0.858002, 6), expect.closeTo(0.499594, 6), expect.closeTo(0.09, 6)]);
    expect([2, 2.5, 3, 4].map(actuatedKMin)).toEqual([0.04012, 0.080156, 0.10803, 0.15396].map((k) => expect.closeTo(k, 6)));
    expect(actuatedK(0.8, 2)).toBeCloseTo(0.316048, 6);
  });

  // Eq. 19-44 to 19-49, T 0.25 h, c 720 veh/h.
  it.each([
    [10, 576, 6.944444],
    [20, 800, 100],
    [50, 576, 160],
  ])("of %d vehicles that wait at the start with %d veh/h", (queue, volume, d3) => {
    expect(initialQueueDelayS(queue, volume, 720)).toBeCloseTo(d3, 6);
  });

  it("is nothing under a light that is always green", () => expect(uniformDelayS(90, 90, 0.5)).toBe(0));
});
