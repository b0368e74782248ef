import { cellArea, getHexagonAreaAvg, getHexagonEdgeLengthAvg, getNumCells, gridDisk, latLngToCell, UNITS } from "h3-js";
import { describe, expect, it } from "vitest";
import { junctionCell } from "@/geo/junction-cell";

/** Cells of public places, computed with the reference library h3-js 4.5.0. */
const CELLS: [place: string, lat: number, lon: number, res9: string, res10: string, res11: string][] = [
  ["London", 51.5007, -0.1246, "89194ad14c3ffff", "8a194ad14c27fff", "8b194ad14c25fff"],
  ["New York", 40.758, -73.9855, "892a100d67bffff", "8a2a100d6797fff", "8b2a100d6793fff"],
  ["Sydney", -33.8568, 151.2153, "89be0e35c0bffff", "8abe0e35c097fff", "8bbe0e35c094fff"],
  ["Quito", -0.1807, -78.4678, "8966d33abb3ffff", "8a66d33abb07fff", "8b66d33abb01fff"],
];

/** Average edge and area in metres: H3 documentation, "Tables of cell statistics", version 4. */
const AVERAGES: [res: number, edgeM: number, areaM2: number, cells: number][] = [
  [9, 200.7861476, 105_332.513427, 4_842_432_842],
  [10, 75.86378287, 15_047.501908, 33_897_029_882],
  [11, 28.66389748, 2_149.643129, 237_279_209_162],
  [12, 10.83018784, 307.091876, 1_660_954_464_122],
];

describe("hexagon index", () => {
  it.each(CELLS)("knows the cells of %s", (_, lat, lon, res9, res10, res11) => {
    expect([9, 10, 11].map((res) => latLngToCell(lat, lon, res))).toEqual([res9, res10, res11]);
    expect(junctionCell(lat, lon)).toBe(res11);
  });

  it.each(AVERAGES)("has the published averages at resolution %i", (res, edgeM, areaM2, cells) => {
    expect(getHexagonEdgeLengthAvg(res, UNITS.m)).toBeCloseTo(edgeM, 3);
    expect(getHexagonAreaAvg(res, UNITS.m2)).toBeCloseTo(areaM2, 2);
    // 2 + 120 * 7^r cells at resolution r.
    expect(getNumCells(res)).toBe(2 + 120 * 7 ** res);
    expect(getNumCells(res)).toBe(cells);
  });

  it("has cells of another size at another place, and 3k(k + 1) + 1 of them in a disk", () => {
    expect(cellArea("89194ad14c3ffff", UNITS.m2)).toBeCloseTo(94_185.781, 0);
    expect(cellArea("89be0e35c0bffff", UNITS.m2)).toBeCloseTo(126_724.224, 0);
    expect([1, 2, 3, 6].map((k) => gridDisk("8b194ad14c25fff", k).length)).toEqual([7, 19, 37, 127]);
  });
});
