import { describe, expect, it } from "vitest";
import { quantile, quantileSorted } from "@/core/stats/quantile";
import { quantileInPlace } from "@/core/stats/quantile-in-place";
import { seededRandom } from "@/core/stats/random";

const TRAVEL_TIMES = [20, 22, 25, 30, 31, 35, 40, 42, 55, 90];

describe("quantile, type 7", () => {
  // R 4.2: quantile(x, p, type = 7).
  it.each([
    [0.05, 20.9],
    [0.15, 23.05],
    [0.5, 33],
    [0.8, 44.6],
    [0.85, 50.45],
    [0.95, 74.25],
  ])("gives R's value at %d", (p, expected) => {
    expect(quantile(TRAVEL_TIMES, p)).toBeCloseTo(expected, 10);
    expect(quantileInPlace(Float32Array.from(TRAVEL_TIMES), 0, 10, p)).toBeCloseTo(expected, 4);
  });

  it("says nothing of nothing and repeats a single value", () => {
    expect(quantile([], 0.5)).toBeNaN();
    expect(quantileInPlace(new Float32Array(3), 1, 1, 0.5)).toBeNaN();
    expect(quantile([7], 0.95)).toBe(7);
  });

  it("leaves its input alone and refuses a share outside 0..1", () => {
    const values = [3, 1, 2];
    expect(quantile(values, 1)).toBe(3);
    expect(values).toEqual([3, 1, 2]);
    expect(() => quantileSorted([1], 1.1)).toThrow("Quantile must lie in 0..1, got 1.1.");
  });

  it("selects the same value as a full sort, inside a stretch, ties included", () => {
    const random = seededRandom(5);
    for (let round = 0; round < 200; round++) {
      const values = Float32Array.from({ length: 3 + Math.floor(random() * 60) }, () => Math.floor(random() * 12));
      const [from, to, p] = [1, values.length - 1, random()];
      const sorted = values.slice(from, to).sort();
      const outside = [values[0], values[to]];
      expect(quantileInPlace(values, from, to, p)).toBeCloseTo(quantileSorted(sorted, p), 5);
      expect([values[0], values[to]]).toEqual(outside);
    }
  });
});
