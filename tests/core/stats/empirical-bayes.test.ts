import { describe, expect, it } from "vitest";
import { competitionRanks } from "@/core/stats/competition-ranks";
import { shrinkMeans } from "@/core/stats/empirical-bayes";
import { normalRandom, seededRandom } from "@/core/stats/random";
import { rankIntervals } from "@/core/stats/rank-draws";

// DerSimonian and Laird (1986) worked on five means and their standard errors.
const MEANS = [62, 48, 35, 30, 25];
const VARIANCES = [12, 4, 3, 2, 5].map((se) => se * se);
const close = (values: number[]): unknown[] => values.map((value) => expect.closeTo(value, 5));

describe("shrinkMeans", () => {
  it("gives the worked example, in which the raw leader falls to second", () => {
    const shrunk = shrinkMeans(MEANS, VARIANCES);
    expect(shrunk.between).toBeCloseTo(69.995295, 5);
    expect(shrunk.mean).toBeCloseTo(36.971668, 5);
    expect([...shrunk.value]).toEqual(close([45.158135, 45.948105, 35.224634, 30.376871, 28.150595]));
    expect([...shrunk.sd]).toEqual(close([6.862993, 3.608752, 2.823937, 1.945192, 4.291937]));
    expect([...competitionRanks(shrunk.value)]).toEqual([2, 1, 3, 4, 5]);
  });

  it("draws all to the common mean where they differ by no more than chance", () => {
    const shrunk = shrinkMeans([20, 21, 19], [100, 100, 100]);
    expect(shrunk.between).toBe(0);
    expect([...shrunk.value]).toEqual(close([20, 20, 20]));
  });

  it("leaves one unit alone and refuses a variance of zero", () => {
    expect(shrinkMeans([30], [4])).toMatchObject({ value: Float64Array.of(30), sd: Float64Array.of(2) });
    expect(() => shrinkMeans([1, 2], [1, 0])).toThrow("Sampling variance must be positive, got 0.");
  });
});

describe("ranks", () => {
  it("share the better place on a tie", () => {
    expect([...competitionRanks([5, 9, 5, 1])]).toEqual([2, 1, 2, 4]);
  });

  it("have the expected values of the worked example", () => {
    const shrunk = shrinkMeans(MEANS, VARIANCES);
    const { expected } = rankIntervals(shrunk.value, shrunk.sd, { draws: 60_000, seed: 1 });
    // 1 + Σ P(θj > θi) from the normal distribution; 60,000 draws leave about 0.004.
    [1.667879, 1.469888, 3.06299, 4.220383, 4.578860].forEach((value, i) => expect(Math.abs(expected[i] - value)).toBeLessThan(0.02));
  });

  it("are the same for the same seed and exact where nothing is uncertain", () => {
    const once = rankIntervals(MEANS, [9, 9, 9, 9, 9], { draws: 500, seed: 3 });
    expect(rankIntervals(MEANS, [9, 9, 9, 9, 9], { draws: 500, seed: 3 })).toEqual(once);
    const sure = rankIntervals([3, 1, 2], [0, 0, 0], { draws: 100, seed: 3 });
    expect([...sure.low]).toEqual([1, 3, 2]);
    expect([...sure.high]).toEqual([1, 3, 2]);
  });

  it("are exact for many units, too", () => {
    const values = Array.from({ length: 150 }, (_, i) => (i * 37) % 150);
    const { low, high, expected } = rankIntervals(values, new Float64Array(150), { draws: 10, seed: 1 });
    values.forEach((value, i) => expect([low[i], high[i], expected[i]]).toEqual([150 - value, 150 - value, expect.closeTo(150 - value, 9)]));
  });

  it("cover the true rank about 95 times in 100", () => {
    const normal = normalRandom(seededRandom(11));
    let covered = 0;
    const cities = 60;
    for (let city = 0; city < cities; city++) {
      const truth = Array.from({ length: 40 }, () => 30 + 10 * normal());
      const se = truth.map((_, i) => 1 + (i % 8));
      const shrunk = shrinkMeans(truth.map((value, i) => value + se[i] * normal()), se.map((s) => s * s));
      const { low, high } = rankIntervals(shrunk.value, shrunk.sd, { draws: 400, seed: city });
      competitionRanks(truth).forEach((rank, i) => (covered += low[i] <= rank && rank <= high[i] ? 1 : 0));
    }
    expect(covered / (cities * 40)).toBeGreaterThan(0.92);
    expect(covered / (cities * 40)).toBeLessThan(0.98);
  });
});

describe("seeded numbers", () => {
  it("are uniform and normal to within chance, and repeat", () => {
    const random = seededRandom(42);
    const values = Array.from({ length: 20_000 }, () => random());
    const average = values.reduce((a, b) => a + b, 0) / values.length;
    // Standard error of the mean: sqrt(1/12 / 20000) = 0.002.
    expect(Math.abs(average - 0.5)).toBeLessThan(0.008);
    const normal = normalRandom(seededRandom(43));
    const squares = Array.from({ length: 20_000 }, () => normal() ** 2).reduce((a, b) => a + b, 0) / 20_000;
    expect(Math.abs(squares - 1)).toBeLessThan(0.04);
    expect(seededRandom(42)()).toBe(values[0]);
    expect(seededRandom(0)()).not.toBe(seededRandom(1)());
  });
});
