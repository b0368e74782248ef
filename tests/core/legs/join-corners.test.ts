import { describe, expect, it } from "vitest";
import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import { draftExit, draftLeg } from "@/core/legs/draft";
import { createFrame } from "@/core/legs/frame";
import { joinCorners } from "@/core/legs/join-corners";
import type { Leg } from "@/core/types";

// B lies 200 m west and 200 m north of A; their street runs west from A, then round a corner to the north.
const a = { id: "A", lat: 45.6, lon: -38.3 };
const plane = planeAt(a.lat, a.lon);
const frame = createFrame([a, { id: "B", lat: latAt(plane, 200), lon: lonAt(plane, -200) }], 1000);
const line = (...xy: number[]): Float64Array => Float64Array.from(xy);

/** Exit of A to the west, and leg of B from the south, each as far as its trace came. */
function street(exitEnd: number, legEnd: number): { legs: Leg[]; exits: ReturnType<typeof draftExit>[] } {
  return { legs: [draftLeg(frame, 1, line(0, -14, 0, legEnd), 9)], exits: [draftExit(frame, 0, line(-14, 0, exitEnd, 0), 9)] };
}

describe("streets with a corner", () => {
  it("are joined where the traces of both junctions end at it", () => {
    const joined = street(-190, -190);
    joinCorners(joined, frame);
    const [leg] = joined.legs;
    expect(leg.upstreamExit).toBe(0);
    // 176 m on either side and 14.1 m across the corner.
    expect(leg.lengthM).toBeCloseTo(176 + 14.14 + 176, 0);
    expect(joined.exits[0].lengthM).toBeCloseTo(leg.lengthM, 0);
    expect(leg.line.at(-2)).toBeCloseTo(200 - 14, 0);
    expect(leg.line.at(-1)).toBeCloseTo(-200, 0);
    // The exit leads from A westwards and ends at B's stop line.
    expect(Array.from(joined.exits[0].line.subarray(0, 2)).map(Math.round)).toEqual([-14, 0]);
    expect(Array.from(joined.exits[0].line.subarray(-2)).map(Math.round)).toEqual([-200, 186]);
  });

  it("stay apart where the ends lie 57 m from each other", () => {
    const joined = street(-160, -160);
    joinCorners(joined, frame);
    expect(joined.legs[0].upstreamExit).toBe(-1);
  });

  it("are no leg and exit side by side: nobody turns round at an end", () => {
    const joined = { legs: [draftLeg(frame, 1, line(0, -14, 0, -100), 9)], exits: [draftExit(frame, 1, line(8, -14, 8, -100), 9), draftExit(frame, 0, line(-196, 280, -196, 110), 9)] };
    joinCorners(joined, frame);
    expect(joined.legs[0].upstreamExit).toBe(-1);
  });

  it("leave an exit alone that feeds a leg already", () => {
    const joined = street(-190, -190);
    joined.legs.push({ ...draftLeg(frame, 1, line(-14, 0, -190, 0), 9), upstreamExit: 0 });
    joinCorners(joined, frame);
    expect(joined.legs[0].upstreamExit).toBe(-1);
  });
});
