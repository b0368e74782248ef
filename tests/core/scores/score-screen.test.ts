import { describe, expect, it } from "vitest";
import type { ScreenDay, ScreenScores } from "@/core/scores/types";
import { normalRandom, seededRandom } from "@/core/stats/random";
import { ALL_DAY, catalogueOf, passagesOf, scoreDays, screenDay, through, type Passage } from "./small-city";

/** A city of five days: each junction's through movement with delays around its mean, as uniform waits at red are. */
function city(means: number[], perDay: number, seed = 1): ScreenDay[] {
  const random = seededRandom(seed);
  return [1, 2, 3, 4, 5].map((day) =>
    screenDay(
      day,
      means.flatMap((mean, k) =>
        Array.from({ length: perDay }, (): Passage => {
          const delayS = 2 * mean * random();
          return { movement: through(k + 1), delayS, stops: delayS > 5 ? 1 : 0, quarter: 30 + Math.floor(8 * random()) };
        }),
      ),
    ),
  );
}

/** All that was scored, in a city of so many junctions. */
function everything({ junctions, movement, leg, traversals }: ScreenScores, count: number) {
  const { movements, legs } = catalogueOf(count);
  return { junctions, traversals, movements: movements.map(({ key }) => movement(key)), legs: legs.map(({ key }) => leg(key)) };
}

const means = (scores: ScreenScores): number[] => scores.junctions.map((j) => j.delay.value);

describe("scoreScreen", () => {
  it("gives the figures of a handful of traversals", () => {
    const days = [
      screenDay(1, [{ movement: 101, delayS: 10, stops: 1, vehicle: 1 }, { movement: 101, delayS: 20, stops: 2, vehicle: 1 }, { movement: 102, delayS: -2, vehicle: 2 }]),
      screenDay(2, [{ movement: 101, delayS: 30, vehicle: 3, quarter: 40 }]),
    ];
    const { movement, junctions, leg, traversals } = scoreDays(days, catalogueOf(1), ALL_DAY);
    expect(traversals).toBe(4);
    const straight = movement(101)!;
    expect(straight).toMatchObject({ vehicles: 3, distinctVehicles: 2, days: 2, stopsPerVehicle: 1, evidence: "none" });
    expect(straight.delay.value).toBe(20);
    expect(straight.stopShare.value).toBeCloseTo(2 / 3, 12);
    expect(junctions[0]).toMatchObject({ junction: 1, vehicles: 4, distinctVehicles: 3, days: 2, medianS: NaN, p95S: NaN, rank: NaN, worstMovement: -1 });
    expect(junctions[0].delay.value).toBe(14.5);
    expect(junctions[0].hoursSeen).toBeCloseTo(58 / 3600, 12);
    expect(leg(10)).toMatchObject({ leg: 10, vehicles: 4, evidence: "none" });
    const unseen = movement(100)!;
    expect(unseen).toMatchObject({ vehicles: 0, days: 0, stopsPerVehicle: NaN, evidence: "none" });
    expect(unseen.delay).toEqual({ value: NaN, low: NaN, high: NaN });
    expect([movement(999), leg(999)]).toEqual([undefined, undefined]);
  });

  it("keeps to the window and the turn", () => {
    const days = [screenDay(1, [{ movement: 101, delayS: 10, quarter: 31 }, { movement: 101, delayS: 30, quarter: 32 }, { movement: 100, delayS: 90, quarter: 33 }, { movement: 101, delayS: 70, quarter: 34 }])];
    const scores = (filter: Partial<typeof ALL_DAY>, turn: "left" | null = null): number => scoreDays(days, catalogueOf(1), { ...ALL_DAY, ...filter, turn }).junctions[0].delay.value;
    expect(scores({ fromQuarter: 32, toQuarter: 34 })).toBe(60);
    expect(scores({ fromQuarter: 32, toQuarter: 33 })).toBe(30);
    expect(scores({}, "left")).toBe(90);
    expect(scores({ fromQuarter: 0, toQuarter: 31 })).toBeNaN();
    expect(() => scores({ fromQuarter: 40, toQuarter: 40 })).toThrow(RangeError);
  });

  it("never reads missing data as no delay: junctions without evidence are listed and not ranked", () => {
    const scores = scoreDays(city([30, 20], 30), catalogueOf(3), ALL_DAY);
    expect(scores.junctions.map((j) => j.rank)).toEqual([1, 2, NaN]);
    expect(scores.junctions[2]).toMatchObject({ vehicles: 0, evidence: "none", hoursSeen: 0, worstLeg: -1 });
    expect(scores.junctions[2].spill).toEqual({ value: NaN, low: NaN, high: NaN });
    expect(scores.junctions[2].shrunk.value).toBeNaN();
  });

  it("ignores movements and legs that the catalogue does not list, and takes no days at all", () => {
    const days = [screenDay(1, [{ movement: 999, delayS: 10 }], [{ leg: 999 }])];
    expect(scoreDays(days, catalogueOf(1), ALL_DAY).traversals).toBe(0);
    expect(scoreDays([], catalogueOf(2), ALL_DAY).junctions.map((j) => j.evidence)).toEqual(["none", "none"]);
    expect(() => scoreDays(days, { movements: [{ key: 1, leg: 5, junction: 1, turn: "left" }], legs: [] }, ALL_DAY)).toThrow(
      "Movement 1 names leg 5, which the catalogue does not list.",
    );
  });

  it("does not let five unlucky vehicles top the list", () => {
    const normal = [52, 46, 41, 38, 36, 33, 31, 28, 26, 24, 22, 20];
    const days = city(normal, 60);
    const quiet = normal.length;
    const unlucky = screenDay(1, [20, 50, 80, 110, 140].map((delayS, vehicle) => ({ movement: through(quiet + 1), delayS, vehicle })));
    const both = [join(days[0], unlucky), ...days.slice(1)];
    const { junctions } = scoreDays(both, catalogueOf(quiet + 1), ALL_DAY);
    const raw = junctions[quiet];
    expect(raw.delay.value).toBe(80);
    expect(raw.evidence).toBe("none");
    expect(raw.rank).toBeNaN();
    // Even where five were allowed to rank, the shrunk delay would not lead.
    expect(raw.shrunk.value).toBeLessThan(junctions[0].shrunk.value);
    expect(junctions[0].rank).toBe(1);
  });

  it("does not draw a well observed junction out of its own interval, however far it stands from the others", () => {
    const { junctions } = scoreDays(city([150, ...Array.from({ length: 30 }, (_, k) => 12 + k)], 25), catalogueOf(31), ALL_DAY);
    expect(junctions[0].shrunk.value).toBeGreaterThan(junctions[0].delay.low);
    expect(junctions[0].shrunk.value).toBeLessThan(junctions[0].delay.value);
    expect(junctions[0]).toMatchObject({ rank: 1, rankLow: 1, rankHigh: 1 });
  });

  it("ranks by shrunk delay, with an interval that holds the rank and is wide where junctions are alike", () => {
    const { junctions } = scoreDays(city([80, 30, 30.5, 31, 31.5, 8], 15), catalogueOf(6), ALL_DAY);
    expect(junctions[0]).toMatchObject({ rank: 1, rankLow: 1, rankHigh: 1 });
    expect(junctions[5]).toMatchObject({ rank: 6, rankLow: 6, rankHigh: 6 });
    for (const alike of junctions.slice(1, 5)) {
      expect(alike.rankLow).toBeGreaterThanOrEqual(2);
      expect(alike.rankHigh).toBeLessThanOrEqual(5);
      expect(alike.rankHigh).toBeGreaterThan(alike.rankLow);
      expect(alike.rank).toBeGreaterThanOrEqual(alike.rankLow);
      expect(alike.rank).toBeLessThanOrEqual(alike.rankHigh);
    }
  });

  it("gives the same for the same seed and in any order of days", () => {
    const days = city([40, 35, 30], 20);
    expect(everything(scoreDays([...days].reverse(), catalogueOf(3), ALL_DAY), 3)).toEqual(everything(scoreDays(days, catalogueOf(3), ALL_DAY), 3));
  });

  it("changes no mean, median or share when every vehicle is doubled", () => {
    const days = city([40, 35, 30], 20);
    const doubled = scoreDays(days.map((day) => join(day, day)), catalogueOf(3), ALL_DAY);
    const once = scoreDays(days, catalogueOf(3), ALL_DAY);
    means(doubled).forEach((value, k) => expect(value).toBeCloseTo(means(once)[k], 9));
    doubled.junctions.forEach((j, k) => {
      expect(j.vehicles).toBe(2 * once.junctions[k].vehicles);
      expect(j.distinctVehicles).toBe(once.junctions[k].distinctVehicles);
      expect(j.stopShare.value).toBeCloseTo(once.junctions[k].stopShare.value, 12);
    });
  });

  it("finds the worst movement by shrunk delay among those with evidence", () => {
    const days = [1, 2, 3, 4, 5].map((day) =>
      screenDay(day, [
        ...Array.from({ length: 12 }, (_, i) => ({ movement: 100, delayS: 40 + i, vehicle: 100 * day + i })),
        ...Array.from({ length: 12 }, (_, i) => ({ movement: 101, delayS: 10 + i, vehicle: 200 * day + i })),
        { movement: 102, delayS: 300, vehicle: day },
      ]),
    );
    expect(scoreDays(days, catalogueOf(1), ALL_DAY).junctions[0].worstMovement).toBe(100);
  });

  it("finds the worst leg by its filled share, and spillback with an interval", () => {
    const catalogue = {
      movements: [],
      legs: [{ key: 1, junction: 7, storageM: 400 }, { key: 2, junction: 7, storageM: 100 }, { key: 3, junction: 7, storageM: NaN }],
    };
    const quarters = Array.from({ length: 20 }, (_, k) => 30 + k);
    const days = [
      screenDay(1, [], quarters.flatMap((quarter, k) => [
        { leg: 1, quarter, reachM: 200 },
        { leg: 2, quarter, reachM: 90, spilledS: k < 3 ? 900 : 0 },
        { leg: 3, quarter, reachM: 500, spilledS: NaN },
      ])),
    ];
    const { junctions, leg } = scoreDays(days, catalogue, ALL_DAY);
    const legs = [1, 2, 3].map((key) => leg(key)!);
    expect(junctions[0].worstLeg).toBe(2);
    expect(junctions[0].spill.value).toBeCloseTo(0.15, 12);
    // Wilson (1927) for 3 of 20 quarters: 0.052369 to 0.360419; runs of spilled quarters can only widen it.
    expect(legs[1].spill.low).toBeLessThanOrEqual(0.052370);
    expect(legs[1].spill.high).toBeGreaterThanOrEqual(0.360418);
    // Nothing in 20 quarters: at most 0.161125.
    expect(legs[0].spill).toEqual({ value: 0, low: 0, high: expect.closeTo(0.161125, 6) });
    expect(legs[2].spill.value).toBeNaN();
    expect(legs[0].reachP95M).toBe(200);
    expect(legs[0].evidence).toBe("none");
  });
});

describe("the rank's interval", () => {
  it("holds the true rank about 95 times in 100", () => {
    const normal = normalRandom(seededRandom(5));
    let covered = 0;
    let ranked = 0;
    for (let seed = 1; seed <= 12; seed++) {
      const truth = Array.from({ length: 25 }, () => Math.max(8, 35 + 12 * normal()));
      const { junctions } = scoreDays(city(truth, 12, seed), catalogueOf(25), ALL_DAY, { rankDraws: 300, seed });
      junctions.forEach((j, k) => {
        const rank = 1 + truth.filter((value) => value > truth[k]).length;
        ranked++;
        if (j.rankLow <= rank && rank <= j.rankHigh) covered++;
      });
    }
    expect(ranked).toBe(300);
    expect(covered / ranked).toBeGreaterThan(0.9);
    expect(covered / ranked).toBeLessThan(0.995);
  });
});

/** All passages of both slices, as one slice. */
function join(a: ScreenDay, b: ScreenDay): ScreenDay {
  return screenDay(a.day, [...passagesOf(a), ...passagesOf(b)]);
}
