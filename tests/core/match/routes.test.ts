import { describe, expect, it } from "vitest";
import { createGraph } from "@/core/match/graph";
import { MATCHING } from "@/core/match/matching";
import { street } from "./small-street";

/** Links 0 to 2 are the legs of A, B and C, each 172 m; link 3 is the exit of C. Boxes are 28 m long. */
const routes = () => createGraph(street()).routes;

describe("ways from link to link", () => {
  it("measures from a stop line to the beginning of a link, with the cost of the junctions passed", () => {
    const table = routes();
    const next = table.find(0, 1, 100);
    expect(table.wayM[next]).toBeCloseTo(28, 6);
    expect(table.cost[next]).toBe(MATCHING.junctionCost);
    const far = table.find(0, 3, 1000);
    expect(table.wayM[far]).toBeCloseTo(28 + 172 + 28 + 172 + 28, 6);
    expect(table.cost[far]).toBeCloseTo(3 * MATCHING.junctionCost, 9);
    expect(table.linksOn(far)).toEqual([1, 2]);
    expect(table.linksOn(next)).toEqual([]);
  });

  it("finds no way against the traffic, nor out of the open", () => {
    const table = routes();
    expect(table.find(1, 0, 1500)).toBe(-1);
    expect(table.find(3, 1, 1500)).toBe(-1);
  });

  it("says the same after a farther search as before it", () => {
    const table = routes();
    const near = table.wayM[table.find(0, 2, 10)];
    table.find(0, 2, MATCHING.routeMostM);
    const row = table.find(0, 2, 10);
    expect(table.wayM[row]).toBe(near);
    expect(table.linksOn(row)).toEqual([1]);
  });
});
