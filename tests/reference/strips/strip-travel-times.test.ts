import { describe, expect, it } from "vitest";

import { addTracks } from "@/core/strips/add-tracks";
import { createStrip, specOfWindow } from "@/core/strips/strip";

import { readRecording } from "../recording";
import { runOnRecording } from "../run-core";
import { OPEN_SKY, isSampled } from "../sampling";
import { crossingS, legTracks } from "./leg-tracks";
import { rideError } from "./ride";

const SECONDS = 3600;
const EXACT = { ...OPEN_SKY, positionSigmaM: 0, speedSigmaMs: 0, headingSlowDeg: 0, headingFloorDeg: 0 };
const KMH = 1 / 3.6;

/** Every vehicle of the grid, every second, without noise: what is left is the strip's own doing. */
const run = runOnRecording(readRecording("grid"), { name: "all", share: 1, intervalS: 1, noise: EXACT, legsKnown: false });
const everyone = () => true;
const oneInTen = (vehicle: string) => isSampled("grid", vehicle, 0.1);
const error = (isSeen: (vehicle: string) => boolean, waveMs: number) => rideError(run, isSeen, { cellM: 10, cellS: 10, waveMs }, SECONDS);

describe("travel times read off strips of signalised legs", { timeout: 120_000 }, () => {
  it("are the vehicles' own within 3 % where time and distance of the rows are read", () => {
    const offLegs = run.network.legs.flatMap(({ lengthM, id }, leg) => {
      const topM = Math.floor((Math.min(lengthM, 250) - 10) / 10) * 10;
      const set = legTracks(run, leg, everyone);
      const whole = Uint8Array.from({ length: set.tracks }, (_, k) => Number(crossingS(set, k, topM) + crossingS(set, k, 0) > 0));
      if (!whole.some(Boolean)) return [];
      const strip = createStrip(specOfWindow({ fromS: -600, toS: SECONDS + 600, bottomM: 0, topM }, 10, 10));
      addTracks(strip, set, whole);
      let readS = 0;
      for (let row = 0; row < strip.spec.rows; row++) {
        const sum = (values: Float64Array) => values.subarray(row * strip.spec.columns, (row + 1) * strip.spec.columns).reduce((a, b) => a + b, 0);
        readS += (sum(strip.timeS) / sum(strip.distanceM)) * strip.spec.cellM;
      }
      const own = [...whole].flatMap((flag, k) => (flag ? [crossingS(set, k, 0) - crossingS(set, k, topM)] : []));
      const ownS = own.reduce((a, b) => a + b, 0) / own.length;
      return Math.abs(readS / ownS - 1) > 0.03 ? [`${id}: read ${readS.toFixed(1)} s, own ${ownS.toFixed(1)} s`] : [];
    });
    expect(offLegs).toEqual([]);
  });

  it("come out better from cells along the wave than from rectangles of the same area, and its speed matters little", () => {
    const rectangles = error(everyone, Infinity);
    const aligned = [10, 15, 20].map((kmh) => error(everyone, kmh * KMH));
    for (const value of aligned) expect(value).toBeLessThan(rectangles);
    expect(Math.max(...aligned) - Math.min(...aligned)).toBeLessThan(0.01);
    expect(aligned[1]).toBeLessThan(0.05);
  });

  it("rest on the sample, not on the shape of the cells, where one vehicle in ten is seen", () => {
    const errors = [Infinity, 10 * KMH, 15 * KMH, 20 * KMH].map((waveMs) => error(oneInTen, waveMs));
    expect(Math.max(...errors) - Math.min(...errors)).toBeLessThan(0.02);
    expect(Math.min(...errors)).toBeGreaterThan(2 * error(everyone, 15 * KMH));
  });
});
