import { describe, expect, it } from "vitest";
import { findStopLine } from "@/core/legs/stop-lines";

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
