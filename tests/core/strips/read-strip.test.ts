import { describe, expect, it } from "vitest";
import { addTracks } from "@/core/strips/add-tracks";
import { reachOfDays, spillShare } from "@/core/strips/reach-of-days";
import { congestedReaches, delayByRow, spillShareOfCells, stripDelayS } from "@/core/strips/read-strip";
import { createStrip, specOfWindow } from "@/core/strips/strip";
import { driveStreet, setOf, sum } from "./support";

const street = { lengthM: 250, freeMs: 13, cycleS: 90, greenS: 30, headwayS: 5, vehicles: 200 };
const REFERENCE_S = 310 / 13;

describe("delay read off a strip", () => {
  it("equals the mean over traversals, for rectangles and for leaning cells", () => {
    const tracks = driveStreet(street);
    const delays = tracks.map(({ points }) => {
      // The last half second overshoots the exit cordon at -60 m.
      const [tBefore, sBefore] = points[points.length - 2];
      const [tAfter, sAfter] = points[points.length - 1];
      const exit = tBefore + ((sBefore + 60) / (sBefore - sAfter)) * (tAfter - tBefore);
      return exit - points[0][0] - REFERENCE_S;
    });
    const mean = sum(delays) / delays.length;
    expect(mean).toBeGreaterThan(20);
    for (const waveMs of [Infinity, 10 / 3.6, 15 / 3.6, 20 / 3.6]) {
      const strip = createStrip(specOfWindow({ fromS: 0, toS: 5400, bottomM: -60, topM: 250.001 }, 120, 10, waveMs));
      addTracks(strip, setOf(tracks));
      expect(stripDelayS(strip, 1 / 13, tracks.length)).toBeCloseTo(mean, 3);
    }
  });

  it("says where it arises: all of it upstream of the stop line, most of it near", () => {
    const tracks = driveStreet(street);
    const strip = createStrip(specOfWindow({ fromS: 0, toS: 5400, bottomM: -60, topM: 250.001 }, 120, 10));
    addTracks(strip, setOf(tracks));
    const byRow = delayByRow(strip, 1 / 13);
    expect(sum(byRow.subarray(0, 6))).toBeCloseTo(0, 1);
    expect(byRow[6]).toBeGreaterThan(byRow[20]);
    expect(sum(byRow)).toBeCloseTo(stripDelayS(strip, 1 / 13, tracks.length), 2);
  });

  it("says nothing without vehicles", () => {
    const strip = createStrip(specOfWindow({ fromS: 0, toS: 60, bottomM: 0, topM: 50 }, 60, 10));
    expect(stripDelayS(strip, 0.1, 0)).toBeNaN();
    expect([...delayByRow(strip, 0.1)]).toEqual([NaN, NaN, NaN, NaN, NaN]);
  });

  it("finds 30 s for one vehicle that stands 30 s, all in the row where it stood", () => {
    const strip = createStrip(specOfWindow({ fromS: 0, toS: 120, bottomM: 0, topM: 50 }, 60, 10));
    addTracks(strip, setOf([{ points: [[10, 50], [12, 30], [42, 30], [45, 0]] }]));
    expect(stripDelayS(strip, 0.1, 1)).toBeCloseTo(30, 6);
    expect(Array.from(delayByRow(strip, 0.1), (d) => Math.round(d) + 0)).toEqual([0, 0, 0, 30, 0]);
  });
});

describe("spillback read off the cells", () => {
  it("follows congested cells from the stop line and jumps only gaps below 80 m", () => {
    const strip = createStrip(specOfWindow({ fromS: 0, toS: 120, bottomM: 0, topM: 300 }, 60, 10));
    // Column 0: standing at 15 and 85 m, and at 285 m. Column 1: one vehicle drives freely.
    addTracks(strip, setOf([15, 85, 285].map((s) => ({ points: [[0, s], [20, s]] }))));
    addTracks(strip, setOf([{ points: [[65, 200], [80, 0]] }]));
    expect([...congestedReaches(strip)]).toEqual([85, 0]);
    expect(spillShareOfCells(strip, 90)).toBe(0.5);
    expect(spillShareOfCells(strip, 120)).toBe(0);
    expect(spillShareOfCells(strip, NaN)).toBeNaN();
  });

  it("agrees with the standing column of the same vehicles", () => {
    const set = setOf(driveStreet({ ...street, lengthM: 260 }));
    const strip = createStrip(specOfWindow({ fromS: 0, toS: 1800, bottomM: 0, topM: 200 }, 10, 10));
    addTracks(strip, set);
    const cells = spillShareOfCells(strip, 200);
    const column = spillShare(reachOfDays(set, 0, 1800, 200), 200);
    expect(cells).toBeGreaterThan(0.1);
    expect(Math.abs(cells - column)).toBeLessThan(0.03);
  });
});
