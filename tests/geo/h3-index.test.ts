import fc from "fast-check";
import { cellToLatLng, getNumCells, gridDisk, latLngToCell } from "h3-js";
import { describe, expect, it } from "vitest";
import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import { createH3Index } from "@/geo/h3-index";

describe("H3", () => {
  // Cells from the H3 project's own tools, version 4.
  it.each([
    [51.5007, -0.1246, "8b194ad14c25fff"],
    [48.8584, 2.2945, "8b1fb46741a1fff"],
    [40.758, -73.9855, "8b2a100d6793fff"],
    [-33.8568, 151.2153, "8bbe0e35c094fff"],
  ])("finds the cell of %d, %d", (lat, lon, cell) => {
    expect(latLngToCell(lat, lon, 11)).toBe(cell);
  });

  it("counts cells and rings as published: 2 + 120 x 7^r, 3k(k + 1) + 1", () => {
    expect(getNumCells(9)).toBe(4_842_432_842);
    expect(gridDisk("8b194ad14c25fff", 6)).toHaveLength(127);
    expect(cellToLatLng("8b194ad14c25fff")[0]).toBeCloseTo(51.50071283658376, 9);
  });
});

describe("claims", () => {
  const index = createH3Index();
  const claim = (lat: number, lon: number, radiusM: number) =>
    index.claim({
      length: 1, lat: Float64Array.of(lat), lon: Float64Array.of(lon), radiusM: Float64Array.of(radiusM), owner: Uint32Array.of(7),
    });

  it("finds the owner everywhere inside a disc, at any latitude", () => {
    fc.assert(
      fc.property(
        fc.double({ min: -65, max: 65, noNaN: true }), fc.double({ min: -179, max: 179, noNaN: true }),
        fc.integer({ min: 5, max: 300 }), fc.double({ min: 0, max: 6.28, noNaN: true }), fc.double({ min: 0, max: 1, noNaN: true }),
        (lat, lon, radiusM, angle, share) => {
          const claims = claim(lat, lon, radiusM);
          const plane = planeAt(lat, lon);
          const r = share * radiusM;
          const slot = claims.find(latAt(plane, r * Math.cos(angle)), lonAt(plane, r * Math.sin(angle)));
          expect(slot).toBeGreaterThanOrEqual(0);
          expect([...claims.owners.slice(claims.offsets[slot], claims.offsets[slot + 1])]).toEqual([7]);
        },
      ),
      { numRuns: 60 },
    );
  });

  it("finds nobody far away", () => {
    const claims = claim(45, 7, 100);
    expect(claims.find(45.01, 7)).toBe(-1);
    expect(claims.find(-45, 7)).toBe(-1);
    expect(claims.find(NaN, 7)).toBe(-1);
  });
});
