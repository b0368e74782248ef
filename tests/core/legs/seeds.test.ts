import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { findPeaks } from "@/core/legs/seeds";

function histogramOf(headings: Record<number, number>): Float32Array {
  const bins = new Float32Array(360);
  for (const [heading, count] of Object.entries(headings)) bins[Number(heading)] = count;
  return bins;
}

describe("directions on the circle", () => {
  it("finds one peak for each leg of a cross, strongest first", () => {
    expect(findPeaks(histogramOf({ 0: 40, 90: 30, 180: 20, 270: 10 }))).toEqual([0.5, 90.5, 180.5, 270.5]);
  });

  it("joins headings on both sides of north", () => {
    expect(findPeaks(histogramOf({ 357: 20, 2: 20 }))).toEqual([359.5]);
  });

  it("keeps legs 45 degrees apart and five of them", () => {
    const peaks = findPeaks(histogramOf({ 10: 50, 55: 20, 120: 30, 200: 25, 290: 15 }));
    expect(peaks.map(Math.floor).sort((a, b) => a - b)).toEqual([10, 55, 120, 200, 290]);
  });

  it("keeps peaks at least 22 degrees apart and turns with the circle", () => {
    const counts = fc.array(fc.integer({ min: 0, max: 30 }), { minLength: 360, maxLength: 360 });
    fc.assert(
      fc.property(counts, fc.integer({ min: 0, max: 359 }), (values, turn) => {
        const peaks = findPeaks(Float32Array.from(values));
        for (const a of peaks) {
          for (const b of peaks) if (a !== b) expect(Math.min(Math.abs(a - b), 360 - Math.abs(a - b))).toBeGreaterThanOrEqual(22);
        }
        const turned = findPeaks(Float32Array.from(values, (_, i) => values[(i - turn + 360) % 360]));
        expect(turned.length).toBeGreaterThan(0);
      }),
      { numRuns: 20 },
    );
  });
});
