import { describe, expect, it } from "vitest";
import { createCellRaster, PIXEL_HALF_DIAGONAL_M } from "@/geo/cell-raster";

describe("the raster of cells", () => {
  it("asks once for each pixel, at its centre", () => {
    const asked: [number, number][] = [];
    const raster = createCellRaster((lat, lon) => {
      asked.push([lat, lon]);
      return `cell ${asked.length}`;
    });
    const first = raster.cellAt(45.6, -38.3);
    expect(raster.cellAt(45.6, -38.3)).toBe(first);
    expect(asked).toHaveLength(1);
    const [north, east] = [(asked[0][0] - 45.6) * 111_195, (asked[0][1] + 38.3) * 111_195 * Math.cos((45.6 * Math.PI) / 180)];
    expect(Math.hypot(north, east)).toBeLessThan(PIXEL_HALF_DIAGONAL_M * 1.01);
    expect(raster.cellAt(45.601, -38.3)).not.toBe(first);
  });

  it("gives places on both sides of the 180th meridian and at the poles a cell", () => {
    const raster = createCellRaster((lat, lon) => `${lat > 0} ${lon > 0}`);
    expect(new Set([raster.cellAt(-17, 179.9999), raster.cellAt(-17, -179.9999), raster.cellAt(90, 0), raster.cellAt(-90, 0)]).size).toBeGreaterThan(1);
  });

  it("numbers cells from 0 in the order in which they are met", () => {
    const raster = createCellRaster(() => "met on the road");
    expect([raster.numberOf("claimed"), raster.cellAt(1, 1), raster.numberOf("claimed"), raster.count()]).toEqual([0, 1, 0, 2]);
  });
});
