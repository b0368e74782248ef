import { describe, expect, it } from "vitest";
import { faceTraffic } from "@/core/legs/bearings";
import type { Kept } from "@/core/legs/prune";
import { FACING, type Headings, type Usage } from "@/core/legs/usage";
import type { Exit, Leg } from "@/core/types";

type Way = [count: number, headingDeg: number, outM: number];

/** So many vehicles with one heading at one distance from the drafted beginning of the only leg or exit. */
function headingsOf(...ways: Way[]): Headings {
  const headings = { count: new Uint32Array(FACING.bins), east: new Float64Array(FACING.bins), north: new Float64Array(FACING.bins) };
  for (const [count, headingDeg, outM] of ways) {
    const bin = Math.floor((outM - FACING.fromM) / FACING.binM);
    headings.count[bin] += count;
    headings.east[bin] += count * Math.sin((headingDeg * Math.PI) / 180);
    headings.north[bin] += count * Math.cos((headingDeg * Math.PI) / 180);
  }
  return headings;
}

/** Bearings of a leg and an exit drafted from 14 m on, which begin at `outM` at last. */
function facing(headings: Headings, outM = 14, carried: string[] = []): number[] {
  const leg = { id: "in", bearingDeg: 8, line: Float64Array.of(0, -14, 0, -200), origin: "derived", locked: false } as Leg;
  const exit = { id: "out", bearingDeg: 356, line: Float64Array.of(0, 14, 0, 200) } as Exit;
  const kept: Kept = {
    legs: [{ ...leg, line: Float64Array.of(0, -outM, 0, -200) }], exits: [{ ...exit, line: Float64Array.of(0, outM, 0, 200) }],
    legFrom: [0], exitFrom: [0],
  };
  const usage = { legHeadings: headings, exitHeadings: headings } as Usage;
  const out = faceTraffic(kept, { legs: [leg], exits: [exit] }, usage, new Set(carried));
  return [out.legs[0].bearingDeg, out.exits[0].bearingDeg];
}

const bearings = (count: number, carried?: string[]): number[] => facing(headingsOf([count, 0, 20]), 14, carried);

describe("bearings of legs and exits", () => {
  it("go half-way to the mean heading of three vehicles, and nearly all the way to that of many", () => {
    expect(bearings(3)).toEqual([4, 358]);
    expect(bearings(157)[0]).toBeCloseTo(8 * (3 / 160), 6);
  });

  it("stay where nobody drove, and where they are known from earlier data", () => {
    expect(bearings(0)).toEqual([8, 356]);
    expect(bearings(3, ["in", "out"])).toEqual([8, 356]);
  });

  it("leave out what vehicles do inside a box that ends farther out than was drafted", () => {
    const bent = headingsOf([100, 350, 20], [100, 0, 60]);
    // Begun at 14 m the first 40 m hold only those that turn; begun at 50 m only those on the street.
    expect(facing(bent, 14)[1]).toBeCloseTo(350 + 6 * (3 / 103), 6);
    expect(facing(bent, 50)[0]).toBeCloseTo(8 * (3 / 103), 6);
  });
});
