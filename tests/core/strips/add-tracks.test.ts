import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { addTracks } from "@/core/strips/add-tracks";
import { createStrip, speedsOf, specOfWindow, type StripSpec } from "@/core/strips/strip";
import { setOf, sum, type ToyTrack } from "./support";

/*
 * Edie's definitions on three toy trajectories, worked by hand in the literature's frame (x grows with the
 * travel). Here s stands for x, so vehicles drive away from s = 0 and distances come out negative; a backward
 * wave runs towards smaller x. The mirrored ones, s = 100 - x, are in our own frame.
 */
const TOY: ToyTrack[] = [
  { day: 1, points: [[5, -50], [30, 200]] },
  { day: 1, points: [[0, 50], [30, 50], [60, 200]] },
  { day: 2, points: [[45, -50], [70, 200]] },
];
/** The same with s falling along the travel: s = 100 - x. */
const MIRRORED: ToyTrack[] = TOY.map((track) => ({ ...track, points: track.points.map(([t, x]): [number, number] => [t, 100 - x]) }));

const grid = (spec: Partial<StripSpec>) => createStrip({ startS: 0, cellS: 60, columns: 1, bottomM: 0, cellM: 100, rows: 1, waveMs: Infinity, ...spec });

describe("Edie totals", () => {
  it("finds D 250 m, T 60 s, v 15 km/h in the rectangle of 100 m by 60 s", () => {
    const strip = grid({});
    addTracks(strip, setOf(MIRRORED));
    expect(strip.distanceM[0]).toBeCloseTo(250, 9);
    expect(strip.timeS[0]).toBeCloseTo(60, 9);
    expect(speedsOf(strip)[0] * 3.6).toBeCloseTo(15, 5);
    expect((strip.distanceM[0] / 6000) * 3600).toBeCloseTo(150, 9);
    expect((strip.timeS[0] / 6000) * 1000).toBeCloseTo(10, 9);
    expect(strip.vehicles[0]).toBe(3);
    expect(strip.days[0]).toBe(2);
  });

  it("finds D 216.67 m, T 46.67 s, v 16.71 km/h in the parallelogram along a wave of -5 m/s", () => {
    // t' = t - x / -5 = t + (100 - s) / 5 = (t - s / 5) + 20, so t' from 20 to 80 is a start of 0 in our frame.
    const strip = grid({ waveMs: 5 });
    addTracks(strip, setOf(MIRRORED));
    expect(strip.distanceM[0]).toBeCloseTo(216.666667, 4);
    expect(strip.timeS[0]).toBeCloseTo(46.666667, 4);
    expect(speedsOf(strip)[0] * 3.6).toBeCloseTo(16.714286, 4);
  });

  it("counts a vehicle that stands on an edge in the cell that begins there, and only there", () => {
    const strip = grid({ cellS: 20, columns: 3, cellM: 50, rows: 2 });
    addTracks(strip, setOf(TOY));
    expect(Array.from(strip.timeS).map((t) => Math.round(t * 1e6) / 1e6)).toEqual([5, 0, 5, 25, 20, 5]);
    expect(Array.from(strip.distanceM).map((d) => Math.round(0 - d * 1e6) / 1e6)).toEqual([50, 0, 50, 50, 50, 50]);
    expect(sum(strip.timeS)).toBeCloseTo(60, 9);
    expect([...strip.vehicles]).toEqual([1, 0, 1, 2, 1, 1]);
  });

  it("leaves out a vehicle that stands on the far edge", () => {
    const strip = grid({});
    addTracks(strip, setOf([{ points: [[0, 100], [30, 100]] }, { points: [[60, 20], [90, 20]] }]));
    expect(sum(strip.timeS)).toBe(0);
  });

  it("counts only the tracks that are included", () => {
    const strip = grid({});
    addTracks(strip, setOf(MIRRORED), Uint8Array.of(0, 1, 0));
    expect(strip.vehicles[0]).toBe(1);
    expect(strip.timeS[0]).toBeCloseTo(40, 9);
  });
});

describe("conservation", () => {
  const wave = fc.oneof(fc.constant(Infinity), fc.double({ min: 2.7, max: 5.6, noNaN: true }));
  const point = fc.tuple(fc.integer({ min: 0, max: 4000 }), fc.integer({ min: -200, max: 3500 }));
  const tracks = fc.array(fc.array(point, { minLength: 2, maxLength: 30 }), { minLength: 1, maxLength: 8 });
  const toTracks = (raw: [number, number][][]): ToyTrack[] =>
    raw.map((points) => ({ points: points.map(([t, s]): [number, number] => [t / 10, s / 10]).sort((a, b) => a[0] - b[0]) }));

  it("keeps all time and distance of tracks that lie inside, for every wave speed and cell size", () => {
    fc.assert(
      fc.property(tracks, wave, fc.integer({ min: 5, max: 50 }), fc.integer({ min: 5, max: 300 }), (raw, waveMs, cellM, cellS) => {
        const set = setOf(toTracks(raw));
        const spec = specOfWindow({ fromS: 0, toS: 401, bottomM: -21, topM: 351 }, cellS, cellM, waveMs);
        const strip = createStrip(spec);
        addTracks(strip, set);
        let time = 0;
        let distance = 0;
        for (let i = 0; i < set.tracks; i++) {
          const [first, last] = [set.offset[i], set.offset[i + 1] - 1];
          time += set.tS[last] - set.tS[first];
          distance += set.sM[first] - set.sM[last];
        }
        expect(sum(strip.timeS)).toBeCloseTo(time, 6);
        expect(sum(strip.distanceM)).toBeCloseTo(distance, 6);
      }),
      { numRuns: 400 },
    );
  });

  it("keeps exactly the clipped part of tracks that leave the grid", () => {
    fc.assert(
      fc.property(tracks, wave, fc.integer({ min: 1, max: 9 }), fc.integer({ min: 1, max: 9 }), (raw, waveMs, rows, columns) => {
        const set = setOf(toTracks(raw));
        const domain = { startS: 50, bottomM: 40, waveMs };
        const cells = createStrip({ ...domain, cellS: 200 / columns, columns, cellM: 180 / rows, rows });
        const whole = createStrip({ ...domain, cellS: 200, columns: 1, cellM: 180, rows: 1 });
        addTracks(cells, set);
        addTracks(whole, set);
        expect(sum(cells.timeS)).toBeCloseTo(whole.timeS[0], 6);
        expect(sum(cells.distanceM)).toBeCloseTo(whole.distanceM[0], 6);
        expect(whole.timeS[0]).toBeCloseTo(timeInside(set.tS, set.sM, set.offset, waveMs), 3);
      }),
      { numRuns: 400 },
    );
  });
});

/** Time inside the parallelogram of the test above, by cutting each piece at its four sides one after another. */
function timeInside(tS: Float32Array, sM: Float32Array, offset: Uint32Array, waveMs: number): number {
  let total = 0;
  for (let i = 0; i + 1 < offset.length; i++) {
    for (let p = offset[i]; p + 1 < offset[i + 1]; p++) {
      const lead = [tS[p] - sM[p] / waveMs, tS[p + 1] - sM[p + 1] / waveMs];
      const shares = [
        ...crossings(lead[0], lead[1], [50, 250]),
        ...crossings(sM[p], sM[p + 1], [40, 220]),
        0,
        1,
      ].sort((a, b) => a - b);
      for (let k = 0; k + 1 < shares.length; k++) {
        const middle = (shares[k] + shares[k + 1]) / 2;
        const u = lead[0] + middle * (lead[1] - lead[0]);
        const v = sM[p] + middle * (sM[p + 1] - sM[p]);
        if (u >= 50 && u < 250 && v >= 40 && v < 220) total += (shares[k + 1] - shares[k]) * (tS[p + 1] - tS[p]);
      }
    }
  }
  return total;
}

function crossings(from: number, to: number, edges: number[]): number[] {
  return edges.map((edge) => (edge - from) / (to - from)).filter((share) => share > 0 && share < 1);
}
