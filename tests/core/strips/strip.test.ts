import { describe, expect, it } from "vitest";
import { cellAt, cellCentre, createStrip, specOfWindow, speedsOf } from "@/core/strips/strip";

const spec = { startS: 100, cellS: 10, columns: 4, bottomM: -20, cellM: 10, rows: 5, waveMs: Infinity };

describe("strip", () => {
  it("numbers cells by row, then column, from the lowest distance", () => {
    expect(cellAt(spec, 100, -20)).toBe(0);
    expect(cellAt(spec, 119.9, -0.1)).toBe(1 * 4 + 1);
    expect(cellCentre(spec, 5)).toEqual({ tS: 115, sM: -5 });
  });

  it("has no cell beyond its edges, nor for NaN", () => {
    expect([cellAt(spec, 140, 0), cellAt(spec, 99.9, 0), cellAt(spec, 100, 30), cellAt(spec, NaN, 0)]).toEqual([-1, -1, -1, -1]);
  });

  it("leans cells so that a row farther back comes later", () => {
    const leaning = { ...spec, waveMs: 2 };
    expect(cellAt(leaning, 100 + 12.5, 25)).toBe(4 * 4);
    expect(cellCentre(leaning, 4 * 4)).toEqual({ tS: 105 + 12.5, sM: 25 });
  });

  it("covers a window without a cell across the stop line", () => {
    const covering = specOfWindow({ fromS: 3600, toS: 7200, bottomM: -25, topM: 304 }, 120, 10, 4);
    expect(covering).toMatchObject({ bottomM: -30, rows: 34, startS: 3600 - 120, columns: 1 + 30 + 1 });
    for (const [t, s] of [[3600, 303.9], [3600, -25], [7199, 303.9], [7199, -25]]) expect(cellAt(covering, t, s)).toBeGreaterThanOrEqual(0);
  });

  it("says NaN where nobody was seen", () => {
    expect(speedsOf(createStrip({ ...spec, columns: 1, rows: 1 }))[0]).toBeNaN();
  });

  it("refuses sizes that make no grid", () => {
    expect(() => createStrip({ ...spec, cellS: 0 })).toThrow(RangeError);
    expect(() => createStrip({ ...spec, rows: 1.5 })).toThrow(RangeError);
    expect(() => createStrip({ ...spec, waveMs: -4 })).toThrow(RangeError);
  });
});
