import { describe, expect, it } from "vitest";
import { eastM, latAt, lonAt, movePoints, northM, planeAt } from "@/core/geometry/plane";

describe("plane", () => {
  // Metres per degree of the WGS 84 ellipsoid, computed with GeographicLib.
  it.each([
    [0, 110574.276, 111319.491],
    [30, 110852.442, 96486.28],
    [45, 111131.777, 78846.835],
    [51.5, 111257.834, 69440.517],
    [60, 111412.287, 55800.002],
  ])("scales degrees at latitude %d", (lat, perLat, perLon) => {
    const plane = planeAt(lat, 0);
    expect(plane.metresPerLat).toBeCloseTo(perLat, 2);
    expect(plane.metresPerLon).toBeCloseTo(perLon, 2);
  });

  // Geodesic lengths by GeographicLib; a sphere is off by 0.3 m and 1.6 m here.
  it("measures half a kilometre as the geodesic does", () => {
    const plane = planeAt(51.5007, -0.1246);
    expect(northM(plane, 51.5052)).toBeCloseTo(500.6605, 1);
    expect(eastM(plane, -0.1174)).toBeCloseTo(499.9641, 1);
  });

  it("goes the short way round across the 180th meridian", () => {
    const plane = planeAt(0, 179.999);
    expect(eastM(plane, -179.999)).toBeCloseTo(0.002 * 111319.491, 2);
  });

  it("finds the way back to degrees", () => {
    const plane = planeAt(45.6, -38.3);
    expect(latAt(plane, northM(plane, 45.603))).toBeCloseTo(45.603, 12);
    expect(lonAt(plane, eastM(plane, -38.297))).toBeCloseTo(-38.297, 12);
  });

  it("moves points between planes", () => {
    const a = planeAt(45.6, -38.3);
    const b = planeAt(45.601, -38.3);
    const [x, y] = movePoints(Float64Array.from([0, 0]), a, b);
    expect(x).toBeCloseTo(0, 9);
    expect(y).toBeCloseTo(-b.metresPerLat * 0.001, 6);
  });
});
