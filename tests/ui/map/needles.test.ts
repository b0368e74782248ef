import { describe, expect, it } from "vitest";
import { boundsOf, linkFeatures, needleEnd, overlap, SHORTEST_NEEDLE_M } from "@/ui/map/needles";
import { groundRule } from "@/ui/map/map-legend";
import { createHoverStore } from "@/ui/map/hover-store";

const needle = (legId: number, lieDeg: number, reachM: number | null = 100, delayS: number | null = 20) => ({ legId, lieDeg, reachM, delayS });
const at = (junctionId: number, lat: number, lon: number, needles = [needle(junctionId, 0)]) => ({ junctionId, lat, lon, rank: 1, needles });

/** Length of a degree on WGS 84 at 45 degrees: 111 132 m of latitude, 78 847 m of longitude (NGA, length of a degree). */
const LAT_M = 111_132;
const LON_M = 78_847;

describe("leg needles", () => {
  it("point the way the leg lies and are as long as the reach on the ground", () => {
    const north = needleEnd({ lat: 45, lon: 10 }, needle(1, 0, 200));
    const east = needleEnd({ lat: 45, lon: 10 }, needle(2, 90, 200));
    expect((north[1] - 45) * LAT_M).toBeCloseTo(200, 0);
    expect(north[0]).toBeCloseTo(10, 9);
    expect((east[0] - 10) * LON_M).toBeCloseTo(200, 0);
    expect(east[1]).toBeCloseTo(45, 9);
  });

  it("are a stub where there is no figure", () => {
    const [, lat] = needleEnd({ lat: 45, lon: 10 }, needle(5, 180, null, null));
    expect((45 - lat) * LAT_M).toBeCloseTo(SHORTEST_NEEDLE_M, 0);
  });
});

describe("links of a city without a base map", () => {
  it("join neighbours once, in the direction of a leg only", () => {
    const south = at(1, 45, 10, [needle(1, 2), needle(2, 90)]);
    const north = at(2, 45.003, 10, [needle(3, 180)]);
    const far = at(3, 45.006, 10, [needle(4, 182)]);
    const lines = linkFeatures([south, north, far]).features.map((f) => f.geometry.coordinates.map(([, lat]) => lat));
    expect(lines).toEqual([[45, 45.003], [45.006, 45.003]]);
  });

  it("reach 1,200 m at most", () => {
    expect(linkFeatures([at(1, 45, 10), at(2, 45.02, 10)]).features).toEqual([]);
  });
});

describe("bounds", () => {
  it("hold all junctions; an empty city has none", () => {
    expect(boundsOf([at(1, 45, 10), at(2, 44, 11)])).toEqual([10, 44, 11, 45]);
    expect(boundsOf([])).toBeNull();
    // Latitude and longitude mixed up.
    expect(boundsOf([at(1, 45, 10), at(2, 44.9, 10.1), at(3, 10, 45)])).toEqual([10, 44.9, 10.1, 45]);
    // Of two there is no middle that tells.
    expect(boundsOf([at(1, 45, 10), at(3, 10, 45)])).toEqual([10, 10, 45, 45]);
  });

  it("tell a base map of another place", () => {
    expect(overlap([0, 0, 2, 2], [1, 1, 3, 3])).toBe(true);
    expect(overlap([0, 0, 2, 2], [3, 0, 4, 2])).toBe(false);
  });
});

describe("rule of the legend", () => {
  it("is the longest of 1, 2, 5 times ten that fits, in the city's unit", () => {
    expect(groundRule(10, "metric", 110)).toEqual({ length: 1000, px: 100 });
    expect(groundRule(1, "metric", 110)).toEqual({ length: 100, px: 100 });
    const feet = groundRule(1, "us", 110);
    expect(feet.length).toBe(200);
    expect(feet.px).toBeCloseTo(200 * 0.3048, 6);
  });
});

describe("hover store", () => {
  it("tells listeners of changes only", () => {
    const store = createHoverStore();
    const seen: (number | null)[] = [];
    const stop = store.subscribe(() => seen.push(store.get()));
    store.set(4);
    store.set(4);
    store.set(null);
    stop();
    store.set(5);
    expect(seen).toEqual([4, null]);
  });
});
