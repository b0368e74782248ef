import { describe, expect, it } from "vitest";
import { faceTraffic } from "@/core/legs/bearings";
import type { Kept } from "@/core/legs/prune";
import type { Headings, Usage } from "@/core/legs/usage";
import type { Exit, Leg } from "@/core/types";

/** So many vehicles, all heading north (0 degrees), on the only leg and the only exit. */
const northbound = (count: number): Headings => ({ count: Uint32Array.of(count), east: Float64Array.of(0), north: Float64Array.of(count) });

function bearings(count: number, carried: string[] = []): number[] {
  const leg = { id: "in", bearingDeg: 8, origin: "derived", locked: false } as Leg;
  const exit = { id: "out", bearingDeg: 356 } as Exit;
  const kept: Kept = { legs: [leg], exits: [exit], legFrom: [0], exitFrom: [0] };
  const usage = { legHeadings: northbound(count), exitHeadings: northbound(count) } as Usage;
  const out = faceTraffic(kept, usage, new Set(carried));
  return [out.legs[0].bearingDeg, out.exits[0].bearingDeg];
}

describe("bearings of legs and exits", () => {
  it("go half-way to the mean heading of three vehicles, and nearly all the way to that of many", () => {
    expect(bearings(3)).toEqual([4, 358]);
    expect(bearings(157)[0]).toBeCloseTo(8 * (3 / 160), 6);
  });

  it("stay where nobody drove, and where they are known from earlier data", () => {
    expect(bearings(0)).toEqual([8, 356]);
    expect(bearings(3, ["in", "out"])).toEqual([8, 356]);
  });
});
