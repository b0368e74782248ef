import { describe, expect, it } from "vitest";
import { draftExit, draftLeg } from "@/core/legs/draft";
import { createFrame } from "@/core/legs/frame";
import { keepUsed } from "@/core/legs/prune";
import type { Usage } from "@/core/legs/usage";

const junctions = [{ id: "A", lat: 45.6, lon: -38.3 }];
const frame = createFrame(junctions, 1000);
const line = (...xy: number[]): Float64Array => Float64Array.from(xy);

/** A leg of 100 m from the south, used by so many trips of which so many had a ping on it; traffic out to the south where asked for. */
function isKept(used: number, seen: number, intervalS: number, outSouth = 0): boolean {
  const leg = draftLeg(frame, 0, line(0, -14, 0, -114), used);
  const exits = [draftExit(frame, 0, line(0, 14, 0, 300), used), draftExit(frame, 0, line(6, -14, 6, -300), outSouth)];
  const usage = {
    leg: Uint32Array.of(used), seenOn: Uint32Array.of(seen), fed: Uint32Array.of(0), exit: Uint32Array.of(used, outSouth),
    movement: new Map(), broken: new Map(), speeds: [[]], heads: [[]],
  } as unknown as Usage;
  const draft = { junctions, legs: [leg], exits, movements: [], driveSide: "right" as const };
  return keepUsed(draft, usage, new Set(), intervalS).legs.length === 1;
}

describe("legs that matched traffic uses", () => {
  it("stay where about as many pings lie on them as must: 100 m at 10 m/s are two of three pings every 15 s", () => {
    // Nine trips: six pings expected, two (0.3 of them and more) are enough.
    expect(isKept(9, 2, 15)).toBe(true);
    expect(isKept(9, 1, 15)).toBe(false);
  });

  it("are not judged by pings where hardly any can lie", () => {
    // Two trips with a ping every 30 s: 0.7 expected.
    expect(isKept(2, 0, 30)).toBe(true);
  });

  it("stay with fewer where traffic drives the same street the other way", () => {
    expect(isKept(9, 1, 15, 3)).toBe(true);
    // Fifteen trips: ten expected.
    expect(isKept(15, 1, 15, 3)).toBe(false);
  });
});
