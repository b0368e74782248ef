import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ScreenQuery, type RankedJunction } from "@/domain/screen";
import { applyScreenFilter } from "@/domain/screen-filter";

const estimate = (value: number) => ({ value, low: value, high: value });

function junction(id: number, given: Partial<RankedJunction>): RankedJunction {
  return {
    junctionId: id, code: `J${id}`, name: `Junction ${id}`, lat: 45.6, lon: -38.3, corridorId: null, corridor: null,
    rank: id, rankLow: id, rankHigh: id, worst: null, delay: estimate(100 - id), shrunkDelayS: 100 - id, medianS: null, p95S: null,
    los: null, hoursSeen: null, stopsPerVehicle: null, reachM: null, storageM: null, spill: null, vehicles: 10, days: 1,
    evidence: "fair", needles: [], ...given,
  };
}

const UNSEEN = { rank: null, rankLow: null, rankHigh: null, delay: null, vehicles: 0, days: 0, evidence: "none" as const };
const CITY = [
  junction(1, { name: "São Paulo Gate", delay: estimate(80), spill: estimate(0.1), corridorId: 7 }),
  junction(2, { name: "Mill Lane 10", delay: estimate(35), spill: estimate(0.004), evidence: "strong", reachM: 50, storageM: 100 }),
  junction(3, { name: "Mill Lane 9", delay: estimate(34.9), spill: estimate(0.2), evidence: "thin", corridorId: 7, reachM: 90, storageM: 300 }),
  junction(4, { name: "Attic Yard", ...UNSEEN }),
];

const idsOf = (query: Partial<ScreenQuery>) => applyScreenFilter(CITY, ScreenQuery.parse({ evidence: "none", ...query })).map((row) => row.junctionId);

describe("applyScreenFilter", () => {
  it("keeps a delay that equals the minimum, and drops junctions whose delay nobody knows", () => {
    expect(idsOf({ minDelay: 35 })).toEqual([1, 2]);
  });

  it("shows unseen junctions last when nothing is asked of their figures", () => {
    expect(idsOf({})).toEqual([1, 2, 3, 4]);
    expect(idsOf({ evidence: "thin" })).toEqual([1, 2, 3]);
    expect(idsOf({ evidence: "strong" })).toEqual([2]);
  });

  it("compares spillback in per cent of the time", () => {
    expect(idsOf({ minSpill: 10 })).toEqual([1, 3]);
    expect(idsOf({ minSpill: 0.4 })).toEqual([1, 2, 3]);
  });

  it("keeps to a corridor", () => {
    expect(idsOf({ corridor: 7 })).toEqual([1, 3]);
  });

  it("finds names without case and accents, and codes", () => {
    expect(idsOf({ q: "sao" })).toEqual([1]);
    expect(idsOf({ q: "j4" })).toEqual([4]);
    expect(idsOf({ q: "MILL" })).toEqual([2, 3]);
  });

  it("puts numbers in names in their order", () => {
    expect(idsOf({ sort: "name" })).toEqual([4, 3, 2, 1]);
    expect(idsOf({ sort: "name", dir: "desc" })).toEqual([1, 2, 3, 4]);
  });

  it("keeps rows without the figure last in both directions", () => {
    expect(idsOf({ sort: "storage" })).toEqual([2, 3, 1, 4]);
    expect(idsOf({ sort: "storage", dir: "asc" })).toEqual([3, 2, 1, 4]);
    expect(idsOf({ sort: "rank", dir: "desc" })).toEqual([3, 2, 1, 4]);
  });

  it("never changes a rank, whatever is filtered", () => {
    const rows = applyScreenFilter(CITY, ScreenQuery.parse({ evidence: "none", minSpill: 15 }));
    expect(rows.map((row) => row.rank)).toEqual([3]);
  });

  it("gives the same order for any order of its input, and leaves its input alone", () => {
    const sorts = fc.constantFrom(...(["rank", "name", "delay", "storage", "evidence", "vehicles"] as const));
    fc.assert(
      fc.property(fc.shuffledSubarray(CITY, { minLength: 4 }), sorts, fc.constantFrom("asc" as const, "desc" as const), (rows, sort, dir) => {
        const before = [...rows];
        const filter = ScreenQuery.parse({ evidence: "none", sort, dir });
        expect(applyScreenFilter(rows, filter)).toEqual(applyScreenFilter(CITY, filter));
        expect(rows).toEqual(before);
      }),
    );
  });
});
