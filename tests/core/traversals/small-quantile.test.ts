import { describe, expect, it } from "vitest";
import { quantileWithin } from "@/core/traversals/small-quantile";

describe("small-sample quantile", () => {
  // R quantile(type = 6) of these ten values.
  const data = [20, 22, 25, 30, 31, 35, 40, 42, 55, 90];
  it.each([
    [0.05, 20],
    [0.15, 21.3],
    [0.5, 33],
    [0.8, 52.4],
    [0.85, 67.25],
    [0.95, 90],
  ])("takes rank p(n + 1) at p = %d", (p, value) => {
    expect(quantileWithin(data, p)).toBeCloseTo(value, 9);
  });

  it("is missing for no values", () => {
    expect(quantileWithin([], 0.5)).toBeNaN();
  });
});
