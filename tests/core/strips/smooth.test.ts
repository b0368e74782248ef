import { describe, expect, it } from "vitest";
import { kernelOf, queuedShare, smoothedSpeedAt, smoothSpeeds, type Sample, type SmoothingKernel } from "@/core/strips/smooth";
import { cellCentre, createStrip, type Strip } from "@/core/strips/strip";

/** A point speed as totals: one second, v metres. The papers' x grows with the travel, s = -x. */
const pointSpeed = (x: number, t: number, v: number): Sample => ({ tS: t, sM: -x, distanceM: v, timeS: 1 });

describe("adaptive smoothing method (Treiber and Helbing 2002)", () => {
  const motorway: SmoothingKernel = { sigmaM: 0.6, tauS: 1.1, freeMs: 80 / 60, waveMs: 15 / 60, thresholdMs: 60, widthMs: 20 };
  const street: SmoothingKernel = { sigmaM: 20, tauS: 6, freeMs: 12.5, waveMs: 5, thresholdMs: 6, widthMs: 2.5 };

  it("weighs the queued view half at the threshold, 0.982 at 20 and 0.018 at 100 km/h", () => {
    // W = 1/2 [1 + tanh((60 - V) / 20)], by hand.
    expect(queuedShare(60, 90, motorway)).toBe(0.5);
    expect(queuedShare(20, 90, motorway)).toBeCloseTo(0.982014, 6);
    expect(queuedShare(100, 120, motorway)).toBeCloseTo(0.017986, 6);
  });

  it("gives 30.685 km/h between three motorway detectors", () => {
    // V_free 44.604814, V_cong 29.992280, W 0.952609, worked from the published formulas.
    const samples = [pointSpeed(0, 0, 90), pointSpeed(1, 2, 30), pointSpeed(2, 0, 20)];
    expect(smoothedSpeedAt(samples, 1, -1, motorway)).toBeCloseTo(30.684783, 5);
  });

  it("gives 1.701 m/s on a street, a standing vehicle among the samples", () => {
    // V_free 2.292639, V_cong 1.682675, W 0.969346.
    const samples = [pointSpeed(0, 0, 12), pointSpeed(20, 4, 1), pointSpeed(40, 8, 0)];
    expect(smoothedSpeedAt(samples, 6, -20, street)).toBeCloseTo(1.701373, 6);
  });
});

describe("smoothing a strip", () => {
  const spec = { startS: 0, cellS: 10, columns: 9, bottomM: -20, cellM: 10, rows: 10, waveMs: 4 };
  const kernel: SmoothingKernel = { sigmaM: 15, tauS: 12, freeMs: 12, waveMs: 4, thresholdMs: 5, widthMs: 2 };
  const fill = (strip: Strip, cell: number, speedMs: number, timeS = 2) => {
    strip.timeS[cell] = timeS;
    strip.distanceM[cell] = speedMs * timeS;
  };

  it("agrees with the method written out sample by sample", () => {
    const strip = createStrip(spec);
    // Upstream rows only, so that the stop line plays no part.
    for (let cell = 2 * 9; cell < 90; cell++) fill(strip, cell, (cell * 7) % 13, 1 + (cell % 3));
    const row = 5;
    const cell = row * 9 + 4;
    const { tS, sM } = cellCentre(spec, cell);
    const samples = Array.from(strip.timeS, (timeS, i) => ({ ...cellCentre(spec, i), distanceM: strip.distanceM[i], timeS }));
    const view = (slowness: number) => samples.filter((s) => Math.abs(s.sM - sM) <= 45 && Math.abs(s.tS - tS + (s.sM - sM) * slowness) <= 36.0001);
    const free = smoothedSpeedAt(view(1 / 12), tS, sM, { ...kernel, thresholdMs: -1e9 });
    const queued = smoothedSpeedAt(view(-1 / 4), tS, sM, { ...kernel, thresholdMs: 1e9 });
    const share = queuedShare(free, queued, kernel);
    expect(smoothSpeeds(strip, kernel)[cell]).toBeCloseTo(share * queued + (1 - share) * free, 5);
  });

  it("keeps one speed everywhere as it is", () => {
    const strip = createStrip(spec);
    for (let cell = 0; cell < 90; cell++) fill(strip, cell, 7, 1 + (cell % 5));
    for (const speed of smoothSpeeds(strip, kernel)) expect(speed).toBeCloseTo(7, 5);
  });

  it("invents nothing where no trajectory is near", () => {
    const strip = createStrip(spec);
    fill(strip, 6 * 9 + 4, 3);
    const smooth = smoothSpeeds(strip, kernel);
    const filled = Array.from(smooth, (speed, cell) => (Number.isNaN(speed) ? -1 : cell)).filter((cell) => cell >= 0);
    const block = [5, 6, 7].flatMap((row) => [3, 4, 5].map((column) => row * 9 + column));
    expect(filled).toEqual(block);
    for (const cell of filled) expect(smooth[cell]).toBeCloseTo(3, 5);
  });

  it("carries nothing across the stop line", () => {
    const strip = createStrip(spec);
    for (let column = 0; column < 9; column++) {
      fill(strip, 9 + column, 12);
      fill(strip, 18 + column, 0);
    }
    const smooth = smoothSpeeds(strip, kernel);
    expect(smooth[9 + 4]).toBeCloseTo(12, 5);
    expect(smooth[18 + 4]).toBeCloseTo(0, 5);
  });

  it("takes its scales from the cells", () => {
    expect(kernelOf({ ...spec, cellS: 120, cellM: 50 }, 10, 4)).toEqual({ sigmaM: 25, tauS: 60, freeMs: 10, waveMs: 4, thresholdMs: 4.5, widthMs: 2 });
  });
});
