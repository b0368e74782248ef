import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { arcLengths } from "@/core/geometry/polyline";
import { MATCHING } from "@/core/match/matching";
import { cutSegments, SEGMENT, type Segments } from "@/core/match/segments";

const field = (segments: Segments, n: number, name: Exclude<keyof typeof SEGMENT, "width">): number => segments.columns[n * SEGMENT.width + SEGMENT[name]];

/** Distance of a point from the nearest segment, and the position there. */
function nearest(segments: Segments, x: number, y: number): { distance: number; position: number } {
  let best = { distance: Infinity, position: NaN };
  for (let n = 0; n < segments.count; n++) {
    const [px, py] = [x - field(segments, n, "x"), y - field(segments, n, "y")];
    const [ux, uy, length] = [field(segments, n, "ux"), field(segments, n, "uy"), field(segments, n, "lengthM")];
    const along = Math.min(length, Math.max(0, px * ux + py * uy));
    const distance = Math.hypot(px - along * ux, py - along * uy);
    if (distance < best.distance) best = { distance, position: field(segments, n, "startM") + along };
  }
  return best;
}

describe("segments of links", () => {
  it("are as few as the line allows, and go on straight beyond its ends", () => {
    // 100 m north with a wobble of 0.3 m, then 50 m east.
    const line = Float64Array.from([0, 0, 0.3, 30, -0.3, 60, 0, 100, 50, 100]);
    const segments = cutSegments([{ line, beforeM: 16, afterM: 10 }]);
    expect(segments.count).toBe(4);
    expect([...segments.link]).toEqual([0, 0, 0, 0]);
    expect(field(segments, 0, "startM")).toBe(-16);
    expect(field(segments, 1, "startM")).toBe(0);
    expect(field(segments, 1, "lengthM")).toBeCloseTo(100, 1);
    expect(field(segments, 2, "bearingDeg")).toBeCloseTo(90, 4);
    expect([field(segments, 3, "x"), field(segments, 3, "y"), field(segments, 3, "lengthM")]).toEqual([50, 100, 10]);
  });

  it("stay within the tolerance of every vertex, at its position on the whole line", () => {
    const step = fc.record({ length: fc.double({ min: 4, max: 30, noNaN: true }), turn: fc.double({ min: -0.35, max: 0.35, noNaN: true }) });
    fc.assert(
      fc.property(fc.array(step, { minLength: 1, maxLength: 40 }), (steps) => {
        const xy = [0, 0];
        let heading = 0;
        for (const { length, turn } of steps) {
          heading = Math.max(-1.2, Math.min(1.2, heading + turn));
          xy.push(xy[xy.length - 2] + length * Math.sin(heading), xy[xy.length - 1] + length * Math.cos(heading));
        }
        const line = Float64Array.from(xy);
        const arcs = arcLengths(line);
        const segments = cutSegments([{ line, beforeM: 0, afterM: 0 }]);
        for (let v = 0; v < arcs.length; v++) {
          const seen = nearest(segments, line[2 * v], line[2 * v + 1]);
          expect(seen.distance).toBeLessThan(MATCHING.simplifyM + 0.01);
          expect(Math.abs(seen.position - arcs[v])).toBeLessThan(0.5);
        }
      }),
    );
  });
});
