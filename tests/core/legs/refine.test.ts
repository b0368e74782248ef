import { describe, expect, it } from "vitest";
import { OFFSET_BIN_M, refineLine } from "@/core/legs/refine";

const straight = Float64Array.from([0, 0, 0, 100]);
const bins = 100 / OFFSET_BIN_M + 1;

describe("refined centrelines", () => {
  it("moves to the middle of many pings, to the right of drawing", () => {
    const count = new Uint32Array(bins).fill(500);
    const moved = refineLine(straight, { count, sum: Float64Array.from(count, (n) => 4 * n) });
    expect(moved).not.toBeNull();
    for (let i = 0; i < (moved as Float64Array).length; i += 2) expect((moved as Float64Array)[i]).toBeCloseTo(4, 1);
  });

  it("stays near where one ping lies aside, and is left alone without any", () => {
    const count = new Uint32Array(bins);
    count[3] = 1;
    const moved = refineLine(straight, { count, sum: Float64Array.from(count, (n) => 8 * n) }) as Float64Array;
    expect(Math.max(...moved.filter((_, i) => i % 2 === 0))).toBeLessThan(2.1);
    expect(refineLine(straight, { count: new Uint32Array(bins), sum: new Float64Array(bins) })).toBeNull();
  });
});
