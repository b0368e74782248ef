import { describe, expect, it } from "vitest";
import type { LegView } from "@/domain/junction";
import { lineLength, pathOf, placeOn, planRadius, planScale, stretchOf, type Point } from "@/ui/junctions/plan-geometry";

/** 30 m north, then 40 m east. */
const BENT: Point[] = [[0, 0], [0, 30], [40, 30]];

describe("places on a line", () => {
  it("walks along the vertices and straight on beyond the end", () => {
    expect(placeOn(BENT, 0)).toEqual({ at: [0, 0], along: [0, 1] });
    expect(placeOn(BENT, 30)).toEqual({ at: [0, 30], along: [0, 1] });
    expect(placeOn(BENT, 50)).toEqual({ at: [20, 30], along: [1, 0] });
    expect(placeOn(BENT, 80)).toEqual({ at: [50, 30], along: [1, 0] });
  });

  it("copes with a point twice, a single point and none", () => {
    expect(placeOn([[0, 0], [0, 0], [0, 10]], 5).at).toEqual([0, 5]);
    expect(placeOn([[3, 4]], 5).at).toEqual([3, 4]);
    expect(placeOn([], 5).at).toEqual([0, 0]);
  });

  it("cuts a stretch and keeps the bends in it", () => {
    expect(stretchOf(BENT, 10, 50)).toEqual([[0, 10], [0, 30], [20, 30]]);
    expect(lineLength(BENT)).toBe(70);
  });
});

describe("scale of a plan", () => {
  it("puts north up and the junction in the middle", () => {
    const scale = planScale(100, 400, 50);
    expect([scale.x(0), scale.y(0)]).toEqual([200, 200]);
    // 150 pixels for 100 m.
    expect([scale.x(100), scale.y(100)]).toEqual([350, 50]);
    expect(pathOf([[0, 0], [0, 100]], scale)).toBe("M200.0 200.0L200.0 50.0");
  });

  const leg = (reachP95M: number | null, storageM: number | null) => ({ reachP95M, storageM }) as LegView;

  it("is as wide as the farthest reach needs, within bounds", () => {
    expect(planRadius([leg(null, null)])).toBe(110);
    expect(planRadius([leg(200, null), leg(50, null)])).toBe(240);
    expect(planRadius([leg(900, null)])).toBe(330);
  });

  it("takes in a storage line that is near, and gives up one that is far", () => {
    expect(planRadius([leg(200, 250)])).toBeCloseTo(265, 9);
    expect(planRadius([leg(50, 600)])).toBe(110);
  });
});
