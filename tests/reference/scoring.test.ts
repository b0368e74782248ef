import { describe, expect, it } from "vitest";

import { decodeCourses, encodeCourses, readRecording } from "./recording";
import { OPEN_SKY, isSampled, samplePings } from "./sampling";
import type { SampledCourse } from "./sampling";
import { createPlane } from "./plane";
import { rankCorrelation } from "./scoring/rank-correlation";
import { bandError } from "./scoring/score-passages";
import { scoreScreen } from "./score";
import type { ScreenRow } from "./score";
import { standingFlags } from "./truth/passages";
import { summarisePassages } from "./truth/summarise";

const plane = createPlane(45.6, -38.3);

function straightCourse(id: string, seconds: number, speedMs: number): SampledCourse {
  return { id, startS: 0, x: Float64Array.from({ length: seconds }, (_, t) => t * speedMs), y: new Float64Array(seconds) };
}

describe("the truth", () => {
  it("stands from below 5 km/h until above 10 km/h", () => {
    const speedMs = [10, 3, 1.3, 2.5, 2.7, 2.9, 2.5].map(Number);
    const course = { id: "a", t: [], x: [], y: [], edge: [], pos: [], lane: [], dwells: [], speedMs };
    expect([...standingFlags({ ...course, t: speedMs.map((_, i) => i) })]).toEqual([0, 0, 1, 1, 1, 0, 0]);
  });

  it("puts a passage into the quarter of its stop line and averages it", () => {
    const passages = [
      { stopLineS: 10, delayS: 4, stops: 0 },
      { stopLineS: 899, delayS: 8, stops: 2 },
      { stopLineS: 900, delayS: 30, stops: 1 },
    ];
    const figures = summarisePassages(passages, ["first", "second"]);
    expect(figures.all).toEqual({ vehicles: 3, meanDelayS: 14, p95DelayS: 27.8, stopShare: 0.6667, stopsPerVehicle: 1 });
    expect(figures.first.meanDelayS).toBe(6);
    expect(figures.second.vehicles).toBe(1);
  });
});

describe("the recordings", () => {
  it("come back from their bytes to the decimetre", () => {
    const course = { id: "v7", startS: 12, x: Float64Array.of(-3.24, 0, 8.51, 8.51), y: Float64Array.of(100, 99.96, -250.3, 4) };
    const [back] = decodeCourses(encodeCourses([course]));
    expect(back.id).toBe("v7");
    expect(back.startS).toBe(12);
    expect([...back.x].map((v) => Number(v.toFixed(1)))).toEqual([-3.2, 0, 8.5, 8.5]);
    expect([...back.y].map((v) => Number(v.toFixed(1)))).toEqual([100, 100, -250.3, 4]);
  });

  it("sample the same vehicles again, the thinner sample out of the denser", () => {
    const names = Array.from({ length: 4000 }, (_, i) => `v${i}`);
    const taken = (share: number) => names.filter((name) => isSampled("grid", name, share));
    expect(taken(0.2).length / names.length).toBeCloseTo(0.2, 1);
    expect(taken(0.05).every((name) => isSampled("grid", name, 0.2))).toBe(true);
  });

  it("give pings whose position error is 4 m in each axis and lasts", () => {
    const errors: number[] = [];
    let product = 0;
    for (let k = 0; k < 300; k++) {
      const pings = samplePings(straightCourse(`v${k}`, 60, 10), "grid", 5, OPEN_SKY, 0, plane);
      const north = pings.map((ping) => (ping.lat - plane.lat) * plane.metresPerDegreeLat);
      errors.push(...north);
      for (let i = 1; i < north.length; i++) product += (north[i] * north[i - 1]) / (16 * 300 * (north.length - 1));
    }
    const variance = errors.reduce((sum, e) => sum + e * e, 0) / errors.length;
    expect(Math.sqrt(variance)).toBeCloseTo(4, 0);
    // AR(1) with 20 s correlation time, 5 s apart: exp(-5/20) = 0.779.
    expect(product).toBeGreaterThan(0.7);
    expect(product).toBeLessThan(0.86);
  });
});

describe("the scorer", () => {
  it("ranks as Spearman does, ties sharing their mean rank", () => {
    expect(rankCorrelation([1, 2, 3, 4], [10, 20, 30, 40])).toBeCloseTo(1, 12);
    expect(rankCorrelation([1, 2, 3], [3, 2, 1])).toBeCloseTo(-1, 12);
    // Ranks 0, 1.5, 1.5, 3 against 0, 1, 2, 3: 4.5 / sqrt(4.5 x 5).
    expect(rankCorrelation([1, 2, 2, 3], [1, 2, 3, 4])).toBeCloseTo(4.5 / Math.sqrt(22.5), 12);
    expect(rankCorrelation([1, 2], [1, 2])).toBeNaN();
  });

  it("counts an error only outside the band", () => {
    expect([bandError(9, 10, 12), bandError(11, 10, 12), bandError(14, 10, 12)]).toEqual([1, 0, 2]);
  });

  it("finds no error of ours in the oracle's own figures", () => {
    const { truth, oracle, passages, courses } = readRecording("odd");
    const rows = oracle["20"].legs.flatMap((leg) =>
      leg.movements.map(
        (movement): ScreenRow => ({
          junctionId: leg.junctionId,
          approachBearingDeg: leg.bearingDeg,
          turn: movement.turn,
          intervalStart: "all",
          vehicles: movement.figures.all.vehicles,
          meanDelayS: movement.figures.all.meanDelayS,
          stopShare: movement.figures.all.stopShare,
          queueReachM: leg.figures.all.reachM,
          spillbackShare: leg.figures.all.spillbackShare ?? Number.NaN,
        }),
      ),
    );
    const pingTimes = new Map(courses.map((course) => [course.id, [...course.x.keys()].map((k) => truth.startMs + (course.startS + k) * 1000)]));
    const scores = scoreScreen({ truth, oracle: oracle["20"], passages, pingTimes, intervalS: 1, rows });
    expect([scores.legRecall, scores.legPrecision, scores.turnsRight, scores.countError, scores.coverage]).toEqual([1, 1, 1, 0, 1]);
    for (const pair of [scores.delayMaeS, scores.delayBiasS, scores.stopShareMae, scores.reachMaeM, scores.rankByDelay]) {
      expect(pair.ours).toBeCloseTo(pair.oracle, 9);
    }
  });
});
