import { describe, expect, it } from "vitest";
import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import { draftExit, draftLeg } from "@/core/legs/draft";
import { createFrame } from "@/core/legs/frame";
import { relinkBroken } from "@/core/legs/relink";
import type { Usage } from "@/core/legs/usage";
import type { Network } from "@/core/types";

const plane = planeAt(45.6, -38.3);
const at = (x: number, y: number) => ({ lat: latAt(plane, y), lon: lonAt(plane, x) });
const junctions = [{ id: "A", ...at(0, 0) }, { id: "B", ...at(0, 300) }];
const frame = createFrame(junctions, 1000);

/** A's northern exit ends 20 m before B's stop line; B's leg was traced off to the west. */
function draft(): Network {
  const exit = draftExit(frame, 0, Float64Array.from([0, 14, 0, 266]), 20);
  const leg = draftLeg(frame, 1, Float64Array.from([0, -14, -200, -14]), 20);
  return { junctions, legs: [leg], exits: [exit], movements: [], driveSide: "right" };
}

const usageOf = (trips: number, fed: number, passed = trips + fed) =>
  ({ broken: new Map([[0, trips]]), fed: Uint32Array.of(fed), leg: Uint32Array.of(passed) }) as unknown as Usage;

describe("paths that break off behind an exit", () => {
  it("hang the leg on which they begin anew on that exit, with its line", () => {
    const relinked = relinkBroken(draft(), usageOf(2, 0), new Set(), frame);
    const leg = relinked?.legs[0];
    expect(leg?.upstreamExit).toBe(0);
    // From the stop line 14 m before B to 14 m behind A.
    expect(leg?.lengthM).toBeCloseTo(272, 0);
    expect(leg?.bearingDeg).toBeCloseTo(0, 1);
  });

  it("leave it where one trip did so, where others come another way, and where it is known", () => {
    expect(relinkBroken(draft(), usageOf(1, 0), new Set(), frame)).toBeNull();
    expect(relinkBroken(draft(), usageOf(5, 3), new Set(), frame)).toBeNull();
    expect(relinkBroken(draft(), usageOf(5, 0, 40), new Set(), frame)).toBeNull();
    expect(relinkBroken(draft(), usageOf(9, 0), new Set([draft().legs[0].id]), frame)).toBeNull();
  });
});
