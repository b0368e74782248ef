import { describe, expect, it } from "vitest";
import { between } from "@/ui/map/mark-layer";
import { flagsOf, fromOrigin, marksOf, NEEDLE_WORDS, nearestMark, RANKED, SHOWN, STRONG } from "@/ui/map/marks";
import { worldAt, worldPxAt } from "@/ui/map/world";

const needle = (legId: number, lieDeg: number, reachM: number | null, delayS: number | null) => ({ legId, lieDeg, reachM, delayS });
const CITY = [
  { junctionId: 7, lat: 45, lon: 10, rank: 1, needles: [needle(1, 90, 200, 90), needle(2, 180, null, null)] },
  { junctionId: 9, lat: 45, lon: 10.01, rank: null, needles: [needle(3, 0, 50, 12)] },
];
/** Equator of WGS 84 over its width in Mercator's picture. */
const worldMetres = (lat: number) => 40_075_017 * Math.cos((lat * Math.PI) / 180);

describe("the world's measure", () => {
  it("has the equator in the middle, Greenwich too, and the poles of Mercator's square at 85.051129 degrees", () => {
    expect(worldAt(0, 0)).toEqual({ x: 0.5, y: 0.5 });
    expect(worldAt(85.051129, -180).x).toBe(0);
    expect(worldAt(85.051129, -180).y).toBeCloseTo(0, 7);
    expect(worldPxAt(0)).toBe(512);
    expect(worldPxAt(3)).toBe(4096);
  });

  it("goes the short way across the 180th meridian", () => {
    expect(fromOrigin(worldAt(0, 179), worldAt(0, -179))[0]).toBeCloseTo(2 / 360, 12);
  });
});

describe("marks of the junctions", () => {
  const marks = marksOf(CITY);
  const word = (needleAt: number, at: number) => marks.needles[needleAt * NEEDLE_WORDS + at];

  it("are drawn with the worst needle last, each at its junction, as long and dark as its figures", () => {
    expect([...marks.needleOwner]).toEqual([0, 1, 0]);
    // 200 m to the east.
    expect(word(2, 2) * worldMetres(45)).toBeCloseTo(200, -1);
    expect(word(2, 3)).toBeCloseTo(0, 9);
    expect([...new Uint8Array(marks.needles.buffer, (2 * NEEDLE_WORDS + 5) * 4, 4)]).toEqual([0x48, 0x15, 0x0d, 255]);
    expect(word(2, 4)).toBeCloseTo(2.6 + 4 * 0.55, 5);
  });

  it("show a leg without a figure as a thin grey stub, never as a delay of zero", () => {
    expect([...new Uint8Array(marks.needles.buffer, 5 * 4, 4)]).toEqual([0xb8, 0xb6, 0xb0, 255]);
    expect(word(0, 4)).toBe(2);
  });

  it("carry what filters and selection say", () => {
    expect(flagsOf(marks, new Set([9]), 7)).toEqual({
      dots: Uint8Array.of(STRONG | RANKED, SHOWN),
      needles: Uint8Array.of(STRONG | RANKED, SHOWN, STRONG | RANKED),
    });
  });

  it("are found by the nearest that passes the filters, within reach only", () => {
    const { dots } = flagsOf(marks, new Set([9]), null);
    const between7and9 = worldAt(45, 10.004);
    // 0.004 degrees to the one, 0.006 to the other.
    expect(nearestMark(marks, dots, between7and9, 0.008 / 360)).toBe(9);
    expect(nearestMark(marks, dots, between7and9, 0.005 / 360)).toBe(7);
    expect(nearestMark(marks, dots, between7and9, 0.003 / 360)).toBeNull();
    expect(nearestMark(marksOf([]), new Uint8Array(), between7and9, 1)).toBeNull();
  });
});

describe("sizes by zoom", () => {
  it("are linear between the stops and level beyond them", () => {
    const stops = [[11, 1], [14, 1.6], [17, 2.8]] as const;
    expect([between(stops, 9), between(stops, 12), between(stops, 15.5), between(stops, 20)].map((value) => value.toFixed(2))).toEqual(["1.00", "1.20", "2.20", "2.80"]);
  });
});
