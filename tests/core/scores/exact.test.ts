import { describe, expect, it } from "vitest";
import { dayByJunction, renumberDay } from "@/core/scores/day-by-junction";
import { indexCatalogue } from "@/core/scores/catalogue-index";
import { legDetail, movementDetail } from "@/core/scores/score-detail";
import { quantile } from "@/core/stats/quantile";
import { seededRandom } from "@/core/stats/random";
import { catalogueOf, daysByJunction, passagesOf, scoreDays, screenDay, through, type Passage, type Queue } from "./small-city";

const JUNCTIONS = 7;
const WINDOW = { fromQuarter: 28, toQuarter: 52, turn: null };
/** Long windows are reckoned from the whole day. */
const WINDOWS = [WINDOW, { fromQuarter: 0, toQuarter: 96, turn: null }, { fromQuarter: 7, toQuarter: 91, turn: null }];

interface Seen extends Passage {
  day: number;
  quarter: number;
  vehicle: number;
  stops: number;
}

/** Six days with delays of any size: below none, common ones, and some beyond the fine steps. */
function made(): { passages: Seen[]; queues: (Queue & { day: number; quarter: number; reachM: number })[] } {
  const random = seededRandom(21);
  const passages = Array.from({ length: 9000 }, (): Seen => {
    const j = 1 + Math.floor(JUNCTIONS * random() ** 2);
    const delayS = random() < 0.01 ? 700 + 900 * random() : -5 + 140 * random() * random();
    return {
      day: 1 + Math.floor(6 * random()), movement: 100 * j + Math.floor(4 * random()), delayS, quarter: Math.floor(96 * random()), vehicle: Math.floor(3000 * random()), stops: delayS > 20 ? 1 + Math.floor(2 * random()) : 0,
    };
  });
  const queues = Array.from({ length: 6 * JUNCTIONS * 40 }, (_, i) => ({
    day: 1 + (i % 6), leg: 10 * (1 + (Math.floor(i / 6) % JUNCTIONS)), quarter: 25 + Math.floor(i / (6 * JUNCTIONS)), reachM: 200 * random(), reachEstimateM: 220 * random(), spilledS: 300 * random(), observedS: 900,
  }));
  return { passages, queues };
}

const { passages, queues } = made();
const days = [1, 2, 3, 4, 5, 6].map((day) => screenDay(day, passages.filter((p) => p.day === day), queues.filter((q) => q.day === day)));
const inWindow = ({ quarter }: { quarter: number }, window = WINDOW): boolean => quarter >= window.fromQuarter && quarter < window.toQuarter;
const average = (values: number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;

describe.each(WINDOWS)("figures from stored slices against those of the values themselves, quarters $fromQuarter to $toQuarter", (window) => {
  const scores = scoreDays(days, catalogueOf(JUNCTIONS), window);

  it.each([1, 2, 3, 7])("junction %d: mean, median and 95th percentile within the rounding of a delay, counts exactly", (j) => {
    const own = passages.filter((p) => Math.floor(p.movement / 100) === j && inWindow(p, window));
    const delays = own.map((p) => p.delayS);
    const score = scores.junctions[j - 1];
    // 1/128 s below 704 s, 1/8 s above: one in a hundred is above, and none of the middle or the 95th percentile.
    expect(Math.abs(score.delay.value - average(delays))).toBeLessThan(1 / 128 + 0.02 / 8);
    expect(Math.abs(score.medianS - quantile(delays, 0.5))).toBeLessThan(1 / 128);
    expect(Math.abs(score.p95S - quantile(delays, 0.95))).toBeLessThan(1 / 128);
    expect(score.vehicles).toBe(own.length);
    expect(score.days).toBe(6);
    expect(score.distinctVehicles).toBe(Math.min(50, new Set(own.map((p) => p.vehicle)).size));
    expect(score.stopsPerVehicle).toBeCloseTo(average(own.map((p) => p.stops)), 12);
    const left = own.filter((p) => p.movement === 100 * j);
    expect(scores.movement(100 * j)).toMatchObject({ vehicles: left.length, stopsPerVehicle: expect.closeTo(average(left.map((p) => p.stops)), 12) });
    const ofLeft = scoreDays(days, catalogueOf(JUNCTIONS), { ...window, turn: "left" }).junctions[j - 1];
    expect(ofLeft.vehicles).toBe(left.length);
    expect(Math.abs(ofLeft.delay.value - average(left.map((p) => p.delayS)))).toBeLessThan(1 / 128 + 0.05 / 8);
    expect(Math.abs(ofLeft.medianS - quantile(left.map((p) => p.delayS), 0.5))).toBeLessThan(1 / 128);
    expect(score.stopShare.value).toBeCloseTo(own.filter((p) => p.stops > 0).length / own.length, 12);
  });

  it("a leg's reach within the rounding of a metre, its spillback within that of a second", () => {
    const own = queues.filter((q) => q.leg === 10 && inWindow(q, window));
    const score = scores.leg(10)!;
    expect(Math.abs(score.reachP95M - quantile(own.map((q) => q.reachM), 0.95))).toBeLessThan(1 / 16);
    expect(score.spill.value).toBeCloseTo(average(own.map((q) => q.spilledS! / 900)), 4);
    expect(score.vehicles).toBe(passages.filter((p) => Math.floor(p.movement / 100) === 1 && inWindow(p, window)).length);
  });

  it("what a page shows beside them, too", () => {
    const ready = daysByJunction(days, catalogueOf(JUNCTIONS));
    const delays = passages.filter((p) => p.movement === through(2) && inWindow(p)).map((p) => p.delayS);
    const detail = movementDetail(ready, through(2), WINDOW);
    expect(Math.abs(detail.medianS - quantile(delays, 0.5))).toBeLessThan(1 / 128);
    expect(Math.abs(detail.p95S - quantile(delays, 0.95))).toBeLessThan(1 / 128);
    const own = queues.filter((q) => q.leg === 30 && inWindow(q));
    const leg = legDetail(ready, 30, WINDOW);
    expect(Math.abs(leg.reachP50M - quantile(own.map((q) => q.reachM), 0.5))).toBeLessThan(1 / 16);
    expect(Math.abs(leg.reachEstimateP95M.value - quantile(own.map((q) => q.reachEstimateM!), 0.95))).toBeLessThan(1 / 16);
    expect(movementDetail(ready, 999, WINDOW)).toEqual({ medianS: NaN, p95S: NaN });
  });
});

describe("a day by junction", () => {
  const full = catalogueOf(JUNCTIONS);

  it("holds every passage of a listed movement once", () => {
    const ready = dayByJunction(days[0], indexCatalogue(full));
    expect(ready.passed.length).toBe(passagesOf(days[0]).length);
    expect(ready.hasUnlisted).toBe(false);
  });

  it("leaves out what the catalogue does not list, and says so", () => {
    const smaller = { movements: full.movements.filter(({ key }) => key !== through(3)), legs: full.legs };
    const ready = dayByJunction(days[0], indexCatalogue(smaller));
    expect(ready.passed.length).toBe(passagesOf(days[0]).filter(({ movement }) => movement !== through(3)).length);
    expect(ready.hasUnlisted).toBe(true);
  });

  it("scores the same under a catalogue that has got new junctions, movements and legs, or lost one", () => {
    const more = {
      movements: [...full.movements, { key: 1, leg: 10, junction: 1, turn: "through" as const }, { key: 50, leg: 5, junction: 0, turn: "left" as const }],
      legs: [...full.legs, { key: 5, junction: 0, storageM: 100 }, { key: 9, junction: 1, storageM: 90 }],
    };
    const without = { movements: full.movements.filter(({ key }) => key !== through(2)), legs: full.legs };
    const fresh = scoreDays(days, more, WINDOW).junctions;
    const held = days.map((day) => dayByJunction(day, indexCatalogue(full)));
    for (const day of held) renumberDay(day, indexCatalogue(more));
    for (const catalogue of [full, more]) for (const day of held) renumberDay(day, indexCatalogue(catalogue));
    expect(held[0]).toEqual(dayByJunction(days[0], indexCatalogue(more)));
    expect(fresh.slice(1).map((j) => j.delay)).toEqual(scoreDays(days, full, WINDOW).junctions.map((j) => j.delay));
    for (const day of held) renumberDay(day, indexCatalogue(without));
    const [, second] = scoreDays(days, without, WINDOW).junctions;
    expect(second.vehicles).toBe(passages.filter((p) => Math.floor(p.movement / 100) === 2 && p.movement !== through(2) && inWindow(p)).length);
  });
});
