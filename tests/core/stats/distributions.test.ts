import { describe, expect, it } from "vitest";
import { incompleteBeta } from "@/core/stats/incomplete-beta";
import { logGamma } from "@/core/stats/log-gamma";
import { mean } from "@/core/stats/mean";
import { studentT975, studentTCdf, studentTQuantile } from "@/core/stats/student-t";
import { variance } from "@/core/stats/variance";
import { wilsonInterval } from "@/core/stats/wilson-interval";

describe("mean and variance", () => {
  // Ten delays worked by hand: mean 28, s 19.316084, 95 % interval 14.182106 to 41.817894.
  const delays = [12, 35, 0, 48, 27, 61, 5, 33, 19, 40];

  it("give the worked interval of ten delays", () => {
    const half = studentTQuantile(0.975, 9) * Math.sqrt(variance(delays) / 10);
    expect(mean(delays)).toBe(28);
    expect(Math.sqrt(variance(delays))).toBeCloseTo(19.316084, 6);
    expect([mean(delays) - half, mean(delays) + half]).toEqual([expect.closeTo(14.182106, 6), expect.closeTo(41.817894, 6)]);
  });

  it("say nothing where there is too little", () => {
    expect(mean([])).toBeNaN();
    expect(variance([3])).toBeNaN();
  });
});

describe("Student's t", () => {
  // Standard tables; R: qt(0.975, df).
  it.each([
    [1, 12.706205],
    [2, 4.302653],
    [4, 2.776445],
    [9, 2.262157],
    [19, 2.093024],
    [29, 2.04523],
    [99, 1.984217],
  ])("has the tabled 97.5 per cent point at %d degrees of freedom", (df, expected) => {
    expect(studentTQuantile(0.975, df)).toBeCloseTo(expected, 6);
    expect(studentT975(df)).toBeCloseTo(expected, 6);
    expect(studentTQuantile(0.025, df)).toBeCloseTo(-expected, 6);
  });

  it("is Cauchy's arctangent at one degree of freedom", () => {
    for (const t of [-3, -0.4, 0, 0.7, 10]) expect(studentTCdf(t, 1)).toBeCloseTo(0.5 + Math.atan(t) / Math.PI, 12);
  });

  it("rounds degrees of freedom down and refuses none", () => {
    expect(studentT975(4.9)).toBe(studentT975(4));
    expect(studentT975(0.3)).toBe(studentT975(1));
    expect(() => studentTQuantile(0.975, 0)).toThrow(RangeError);
  });
});

describe("gamma and beta functions", () => {
  it("agree with closed forms", () => {
    expect(logGamma(5)).toBeCloseTo(Math.log(24), 12);
    expect(logGamma(0.5)).toBeCloseTo(0.5 * Math.log(Math.PI), 12);
    // I_x(1, b) = 1 - (1 - x)^b; I_x(a, 1) = x^a; I_1/2(a, a) = 1/2.
    expect(incompleteBeta(0.3, 1, 4)).toBeCloseTo(1 - 0.7 ** 4, 12);
    expect(incompleteBeta(0.3, 2.5, 1)).toBeCloseTo(0.3 ** 2.5, 12);
    expect(incompleteBeta(0.5, 17, 17)).toBeCloseTo(0.5, 12);
  });
});

describe("Wilson interval", () => {
  // Wilson (1927), 95 %, closed form; at one half it is 1/2 ± z / (2 sqrt(n + z²)).
  it.each([
    [3, 20, 0.052369, 0.360419],
    [15, 30, 0.331541, 0.668459],
    [0, 10, 0, 0.277533],
    [0, 20, 0, 0.161125],
  ])("of %d in %d", (hits, n, low, high) => {
    const interval = wilsonInterval(hits / n, n);
    expect(interval.low).toBeCloseTo(low, 6);
    expect(interval.high).toBeCloseTo(high, 6);
  });

  it("says nothing without observations", () => {
    expect(wilsonInterval(NaN, 0)).toEqual({ low: NaN, high: NaN });
  });
});
