import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import { CELL, cellAt, countOf, createLinkGrid, firstOf, type LinkGrid } from "@/core/match/link-grid";
import { MATCHING } from "@/core/match/matching";
import { cutSegments } from "@/core/match/segments";

/** Segments that the cell of a position holds. */
function segmentsAt(grid: LinkGrid, lat: number, lon: number): number[] {
  const cell = cellAt(grid, lat, lon);
  if (cell < 0) return [];
  const runs = [...grid.runs.subarray(grid.records[cell + CELL.first], grid.records[cell + CELL.end])];
  return runs.flatMap((run) => Array.from({ length: countOf(run) }, (_, n) => firstOf(run) + n));
}

/** Two links at each of some places: one bent, one straight beside it. */
const bent = Float64Array.from([-150, 0, 0, 20, 120, 160]);
const straight = Float64Array.from([-150, 40, 150, 40]);

function gridAt(places: { lat: number; lon: number }[]) {
  const planes = places.map(({ lat, lon }) => planeAt(lat, lon));
  const segments = cutSegments(places.flatMap(() => [{ line: bent, beforeM: 0, afterM: 0 }, { line: straight, beforeM: 0, afterM: 0 }]));
  const home = Int32Array.from({ length: 2 * places.length }, (_, link) => link >> 1);
  return { planes, segments, grid: createLinkGrid(segments, home, planes) };
}

describe("the grid of links", () => {
  it("finds every segment within the side limit, in one city or in two far apart, and across the 180th meridian", () => {
    const place = fc.record({ lat: fc.double({ min: -65, max: 65, noNaN: true }), lon: fc.constantFrom(-179.9995, -38.3, 0, 7.25, 179.9995) });
    const share = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(place, fc.double({ min: -3, max: 3, noNaN: true }), share, fc.double({ min: -1, max: 1, noNaN: true }), (here, north, along, aside) => {
        const { planes, grid } = gridAt([here, { lat: here.lat + north, lon: here.lon }]);
        planes.forEach((plane, k) => {
          // Segments 3 k and 3 k + 1 are the bent link, 3 k + 2 is the straight one.
          const lon = lonAt(plane, -150 + 300 * along);
          const found = segmentsAt(grid, latAt(plane, 40 + MATCHING.sideLimitM * aside), lon > 180 ? lon - 360 : lon < -180 ? lon + 360 : lon);
          expect(found).toContain(3 * k + 2);
          expect(found).toEqual([...found].sort((a, b) => a - b));
        });
      }),
      { numRuns: 60 },
    );
  });

  it("finds nothing where no link is near, nor at no place", () => {
    const { grid, planes } = gridAt([{ lat: 45.6, lon: -38.3 }]);
    expect(segmentsAt(grid, latAt(planes[0], -90), -38.3)).toEqual([]);
    expect(segmentsAt(grid, 45.7, -38.3)).toEqual([]);
    expect(segmentsAt(grid, -45.6, 141.7)).toEqual([]);
    expect(segmentsAt(grid, NaN, NaN)).toEqual([]);
  });

  it("puts successive segments of a link into one run, and those of another into the next", () => {
    const { grid, planes } = gridAt([{ lat: 45.6, lon: -38.3 }]);
    const cell = cellAt(grid, latAt(planes[0], 28), lonAt(planes[0], 0));
    const runs = [...grid.runs.subarray(grid.records[cell + CELL.first], grid.records[cell + CELL.end])];
    expect(runs.map((run) => [firstOf(run), countOf(run)])).toEqual([[0, 2], [2, 1]]);
  });
});
