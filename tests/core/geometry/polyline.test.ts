import { describe, expect, it } from "vitest";
import { arcLengths, chordBearingDeg, keptVertices, lengthOf, pointAt, projectNear, projectPoint, reversed, simplify, slice } from "@/core/geometry/polyline";

/** 30 m north, then 40 m east. */
const corner = Float64Array.from([0, 0, 0, 30, 40, 30]);

describe("polyline", () => {
  it("adds up arc lengths", () => {
    expect([...arcLengths(corner)]).toEqual([0, 30, 70]);
    expect(lengthOf(corner)).toBe(70);
  });

  it("finds points along the line and straight beyond its ends", () => {
    expect(pointAt(corner, 50)).toEqual([20, 30]);
    expect(pointAt(corner, -5)).toEqual([0, -5]);
    expect(pointAt(corner, 75)).toEqual([45, 30]);
  });

  it("takes bearings of chords", () => {
    expect(chordBearingDeg(corner, 0, 30)).toBe(0);
    expect(chordBearingDeg(corner, 30, 60)).toBe(90);
  });

  it("projects with the side, right positive", () => {
    expect(projectPoint(corner, 3, 10)).toEqual({ at: 10, offset: 3 });
    expect(projectPoint(corner, 20, 34)).toEqual({ at: 50, offset: -4 });
    expect(projectPoint(corner, 44, 33)).toEqual({ at: 70, offset: -5 });
  });

  it("projects on the part of a line that is near to a place on it", () => {
    // Out 100 m, across 10 m and back: a point between the two is as near to both.
    const hairpin = Float64Array.from([0, 0, 100, 0, 100, 10, 0, 10]);
    const arcs = arcLengths(hairpin);
    expect(projectNear(hairpin, arcs, 40, 4.9, 45, 25)).toEqual({ at: 40, offset: -4.9 });
    expect(projectNear(hairpin, arcs, 40, 4.9, 165, 25)).toEqual({ at: 170, offset: -5.1 });
    expect(projectNear(hairpin, arcs, 97, 3, 101, 1000)).toEqual(projectPoint(hairpin, 97, 3));
  });

  it("cuts a piece out, prolonged where asked", () => {
    expect([...slice(corner, 20, 40)]).toEqual([0, 20, 0, 30, 10, 30]);
    expect([...slice(corner, -10, 10)]).toEqual([0, -10, 0, 0, 0, 10]);
    expect([...reversed(corner)]).toEqual([40, 30, 0, 30, 0, 0]);
  });

  it("drops vertices that lie within the tolerance of the rest", () => {
    const wavy = Float64Array.from([0, 0, 10, 0.4, 20, 0, 30, 5, 40, 0]);
    expect([...simplify(wavy, 0.5)]).toEqual([0, 0, 20, 0, 30, 5, 40, 0]);
    expect(keptVertices(wavy, 0.5)).toEqual([0, 2, 3, 4]);
    expect(keptVertices(Float64Array.of(1, 2), 0.5)).toEqual([0]);
  });
});
