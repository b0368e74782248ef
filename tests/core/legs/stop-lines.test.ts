import { describe, expect, it } from "vitest";
import { findStopLine, placeStopLines } from "@/core/legs/stop-lines";
import type { Exit, Leg } from "@/core/types";

/** Half a car and a gap lie between the first vehicle's place and the line. */
const STANDS_BEFORE_M = 3;
const GOLDEN = 0.618034;

/** Normal noise without a generator: Box and Muller's transform of an even sequence. */
const noiseOf = (i: number, n: number): number => Math.sqrt(-2 * Math.log((i + 0.5) / n)) * Math.cos(2 * Math.PI * GOLDEN * i);

/** Places of queues: 64 first vehicles at `first`, half as many in each next place 7.5 m behind, noise of 4 m. */
function headsOf(first: number): number[] {
  return [64, 32, 16, 8, 4].flatMap((n, place) => Array.from({ length: n }, (_, i) => first + 7.5 * place + 4 * noiseOf(i, n)));
}

describe("stop line from the places of standing vehicles", () => {
  it.each([-6, 0, 4, 11])("finds the line of first vehicles at %d m, half a car before them", (first) => {
    expect(Math.abs(findStopLine(headsOf(first)) - (first - STANDS_BEFORE_M))).toBeLessThanOrEqual(1);
  });

  it("is not moved by a few vehicles that wait far back or past the line", () => {
    expect(Math.abs(findStopLine([...headsOf(5), 90, 120, -14]) - (5 - STANDS_BEFORE_M))).toBeLessThanOrEqual(1);
  });

  it("says nothing where fewer than eight stood", () => {
    expect(findStopLine([1, 2, 3, 4, 5, 6, 7])).toBeNaN();
  });
});

describe("stop lines of a junction", () => {
  /** Legs from the south and from the east, both begun at 14 m by default. */
  const legOf = (id: string, x: number, y: number): Leg => ({
    id, junction: 0, name: id, bearingDeg: 0, line: Float64Array.of(14 * x, 14 * y, 114 * x, 114 * y), lengthM: 100, upstreamExit: -1, storageM: NaN,
    freeSpeedMs: 14, speedLimitMs: NaN, origin: "derived", stopLineOrigin: "default", locked: false, support: 20, doubts: [],
  });
  const legs = [legOf("S", 0, -1), legOf("E", 1, 0)];

  it("go as far out as the others of the junction where too few stood", () => {
    const [south, east] = placeStopLines(legs, [], { heads: [headsOf(-4), [3, 5]] }, new Set());
    expect(south.stopLineOrigin).toBe("derived");
    // Stood 4 m nearer and half a car before the line: at 7 m instead of 14 m.
    expect(Math.abs(-south.line[1] - 7)).toBeLessThanOrEqual(1);
    expect(east.stopLineOrigin).toBe("default");
    expect(east.line[0]).toBeCloseTo(-south.line[1], 6);
    expect(east.lengthM).toBeCloseTo(100 + 14 - east.line[0], 6);
  });

  it("lengthen a leg of 10 m to where its vehicles stand, but shorten none to less than 20 m", () => {
    const short = { ...legs[0], line: Float64Array.of(0, -14, 0, -24), lengthM: 10 };
    // At 7 m from the junction instead of 14 m, see above.
    expect(placeStopLines([short], [], { heads: [headsOf(-4)] }, new Set())[0].lengthM).toBeCloseTo(17, 0);
    const medium = { ...legs[0], line: Float64Array.of(0, -14, 0, -38), lengthM: 24 };
    expect(placeStopLines([medium], [], { heads: [headsOf(11)] }, new Set())[0].lengthM).toBe(24);
  });

  it("stay where nobody stood at the junction, or the leg is locked", () => {
    expect(placeStopLines(legs, [], { heads: [[], []] }, new Set())).toEqual(legs);
    const locked = { ...legs[1], locked: true };
    expect(placeStopLines([legs[0], locked], [], { heads: [headsOf(-4), []] }, new Set())[1]).toEqual(locked);
  });

  it("lie far out where another street meets at a sharp angle, and only there", () => {
    // First vehicles stand 38 m behind the drafted line at 14 m: the line is at 14 + 38 - 3 = 49 m.
    const exitTo = (bearingDeg: number) => [{ junction: 0, bearingDeg } as Exit];
    const far = { heads: [headsOf(38)] };
    expect(Math.abs(-placeStopLines([legs[0]], exitTo(205), far, new Set())[0].line[1] - 49)).toBeLessThanOrEqual(1);
    expect(-placeStopLines([legs[0]], exitTo(270), far, new Set())[0].line[1]).toBeLessThanOrEqual(14 + 18);
  });
});
