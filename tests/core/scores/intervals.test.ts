import { describe, expect, it } from "vitest";
import { clusterVariance } from "@/core/scores/cluster-variance";
import { evidenceOf } from "@/core/scores/evidence";
import { meanIntervals } from "@/core/scores/mean-intervals";
import { addToTally, closeDay, closeQuarterOf, clustersFor, createTally, type RatioTally } from "@/core/scores/ratio-tally";
import { normalRandom, seededRandom } from "@/core/stats/random";

function closeQuarter(tally: RatioTally): void {
  for (let unit = 0; unit < tally.base.length; unit++) closeQuarterOf(tally, unit);
}

/** One unit; each day a list of quarters, each quarter [base, total] or null where nothing was seen. */
function tallyOf(days: ([number, number] | null)[][]): RatioTally {
  const tally = createTally(1, clustersFor(days.length));
  for (const day of days) {
    for (const quarter of day) {
      if (quarter) addToTally(tally, 0, quarter[0], quarter[1]);
      closeQuarter(tally);
    }
    closeDay(tally);
  }
  return tally;
}

describe("clusterVariance", () => {
  it("is the linearised variance between days (worked by hand)", () => {
    // Days of 2, 3 and 5 vehicles with 20, 60 and 120 s: mean 20; residual sums -20, 0, 20; squares 800.
    // Variance 3/2 × 800 / 10² = 12; effective days 100 / 38.
    const own = clusterVariance(tallyOf([[[2, 20]], [[3, 60]], [[5, 120]]]), 0);
    expect(own.variance).toBeCloseTo(12, 12);
    expect(own.df).toBeCloseTo(100 / 38 - 1, 12);
    expect(own.size).toBeCloseTo(3.8, 12);
  });

  it("compares neighbouring quarters of a day where there are fewer than three (worked by hand)", () => {
    // Means 10, 20, 30, 40 of two vehicles each: sums 20, 40, 60, 80 rise by 20 each; 3 steps of 400.
    // Variance 4 × 1200 / (2 × 3 × 8²) = 12.5, where the plain variance between clusters would give 55.6.
    const own = clusterVariance(tallyOf([[[2, 20], [2, 40], [2, 60], [2, 80]]]), 0);
    expect(own.variance).toBeCloseTo(12.5, 12);
    expect(own.df).toBeCloseTo(2, 12);
  });

  it("does not step from one day to the next, nor count empty quarters", () => {
    const own = clusterVariance(tallyOf([[[1, 10], null, [1, 14]], [[1, 100]]]), 0);
    // One step of 4 s; three quarters: 3 × 16 / (2 × 1 × 3²).
    expect(own.variance).toBeCloseTo(48 / 18, 12);
  });

  it("says nothing from one cluster", () => {
    const own = clusterVariance(tallyOf([[[4, 80]]]), 0);
    expect(own.df).toBe(0);
    expect(own.variance).toBeNaN();
  });
});

interface World {
  days: number;
  quarters: number;
  /** Mean number of vehicles in a quarter. */
  flow: number;
  /** Coefficients of variation of the mean delay from day to day and from quarter to quarter. */
  dayCv: number;
  quarterCv: number;
}

/** Share of 40 units' intervals that hold the long-run mean. Delays: six in ten wait uniformly, the rest pass freely. */
function coverage(world: World, seed: number): number {
  const random = seededRandom(seed);
  const normal = normalRandom(random);
  const shock = (cv: number): number => Math.exp(cv * normal() - (cv * cv) / 2);
  const truth = Array.from({ length: 40 }, () => 15 + 45 * random());
  const tally = createTally(40, clustersFor(world.days));
  const sumSq = new Float64Array(40);
  for (let day = 0; day < world.days; day++) {
    const ofDay = truth.map((mean) => mean * shock(world.dayCv));
    for (let quarter = 0; quarter < world.quarters; quarter++) {
      ofDay.forEach((mean, unit) => {
        const now = mean * shock(world.quarterCv);
        for (let vehicles = poisson(world.flow, random); vehicles > 0; vehicles--) {
          const delayS = random() < 0.6 ? (random() * 2 * now) / 0.6 : 1.5 * normal();
          sumSq[unit] += delayS * delayS;
          addToTally(tally, unit, 1, delayS);
        }
      });
      closeQuarter(tally);
    }
    closeDay(tally);
  }
  const { low, high } = meanIntervals(tally, sumSq, new Uint8Array(40));
  const seen = truth.flatMap((mean, unit) => (tally.base[unit] > 0 ? [{ mean, unit }] : []));
  return seen.filter(({ mean, unit }) => low[unit] <= mean && mean <= high[unit]).length / seen.length;
}

function poisson(mean: number, random: () => number): number {
  let count = 0;
  for (let product = random(); product > Math.exp(-mean); product *= random()) count++;
  return count;
}

describe("meanIntervals", () => {
  it.each<[string, World]>([
    ["a single day with few vehicles", { days: 1, quarters: 4, flow: 1, dayCv: 0, quarterCv: 0 }],
    ["a single day", { days: 1, quarters: 8, flow: 6, dayCv: 0, quarterCv: 0 }],
    ["five alike days", { days: 5, quarters: 6, flow: 5, dayCv: 0, quarterCv: 0 }],
    ["five days that differ", { days: 5, quarters: 6, flow: 5, dayCv: 0.2, quarterCv: 0.2 }],
    ["five days with hardly a vehicle each", { days: 5, quarters: 6, flow: 0.3, dayCv: 0.2, quarterCv: 0.2 }],
    ["twenty days that differ much", { days: 20, quarters: 6, flow: 3, dayCv: 0.3, quarterCv: 0.2 }],
  ])("holds the true mean 90 to 98 times in 100: %s", (_, world) => {
    const rounds = 25;
    let sum = 0;
    for (let seed = 1; seed <= rounds; seed++) sum += coverage(world, seed);
    expect(sum / rounds).toBeGreaterThan(0.9);
    expect(sum / rounds).toBeLessThan(0.985);
  });

  it("does not take a few equal delays for certainty", () => {
    const tally = createTally(2, "quarters");
    const sumSq = Float64Array.of(3 * 40 * 40, 0);
    for (let k = 0; k < 3; k++) addToTally(tally, 0, 1, 40);
    for (const delayS of [0, 5, 30, 60, 80, 10, 45]) {
      addToTally(tally, 1, 1, delayS);
      sumSq[1] += delayS * delayS;
    }
    closeDay(tally);
    const { low, high, value } = meanIntervals(tally, sumSq, new Uint8Array(2));
    expect(value[0]).toBe(40);
    expect(high[0] - low[0]).toBeGreaterThan(30);
  });

  it("gives nothing for a unit that nobody passed", () => {
    const { value, low, high } = meanIntervals(createTally(1, "days"), new Float64Array(1), new Uint8Array(1));
    expect([value[0], low[0], high[0]]).toEqual([NaN, NaN, NaN]);
  });
});

describe("evidenceOf", () => {
  const delay = (value: number, half: number) => ({ value, low: value - half, high: value + half });

  it.each([
    ["strong", 100, 50, 5, delay(40, 6)],
    ["fair", 100, 50, 4, delay(40, 6)],
    ["fair", 100, 50, 5, delay(40, 6.1)],
    ["fair", 30, 15, 3, delay(10, 8)],
    ["thin", 29, 15, 3, delay(10, 2)],
    ["thin", 500, 300, 1, delay(40, 2)],
    ["thin", 10, 5, 1, delay(40, 60)],
    ["none", 9, 9, 3, delay(40, 5)],
    ["none", 40, 4, 5, delay(40, 5)],
    ["none", 0, 0, 0, delay(NaN, NaN)],
  ] as const)("is %s for %d traversals of %d vehicles on %d days", (grade, vehicles, distinctVehicles, days, estimate) => {
    expect(evidenceOf({ vehicles, distinctVehicles, days, delay: estimate })).toBe(grade);
  });
});
