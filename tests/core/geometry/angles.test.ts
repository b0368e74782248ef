import { describe, expect, it } from "vitest";
import { angleBetweenDeg, bearingDeg, compassWord, normaliseDeg, signedTurnDeg } from "@/core/geometry/angles";

describe("angles", () => {
  it.each([
    [350, 80, 90],
    [10, 280, -90],
    [90, 95, 5],
    [350, 10, 20],
    [270, 0, 90],
    [180, 90, -90],
    [0, 180, 180],
    [45, 225, 180],
  ])("turns from %d to %d by %d degrees", (from, to, turn) => {
    expect(signedTurnDeg(from, to)).toBe(turn);
  });

  it("brings any angle into [0, 360)", () => {
    expect(normaliseDeg(-30)).toBe(330);
    expect(normaliseDeg(720)).toBe(0);
  });

  it("measures the smaller angle between bearings", () => {
    expect(angleBetweenDeg(350, 20)).toBe(30);
    expect(angleBetweenDeg(370, 20)).toBe(10);
  });

  it("reads bearings clockwise from north", () => {
    expect(bearingDeg(1, 0)).toBe(90);
    expect(bearingDeg(0, -1)).toBe(180);
    expect(bearingDeg(-1, 1)).toBe(315);
    expect(bearingDeg(0, 0)).toBeNaN();
  });

  it("names the nearest of eight compass points", () => {
    expect(compassWord(22)).toBe("north");
    expect(compassWord(23)).toBe("north-east");
    expect(compassWord(359)).toBe("north");
  });
});
