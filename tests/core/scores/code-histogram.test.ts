import { describe, expect, it } from "vitest";
import { countCodes, countKnown, createHistogram, emptyHistogram, histogramQuantile } from "@/core/scores/code-histogram";
import { createDistinctSets } from "@/core/scores/distinct-sets";
import { quantile } from "@/core/stats/quantile";
import { seededRandom } from "@/core/stats/random";

const plain = (code: number): number => code;

describe("quantiles of counted codes", () => {
  it("are those of the codes themselves", () => {
    const random = seededRandom(11);
    const histogram = createHistogram();
    for (const length of [1, 2, 3, 20, 333, 5000]) {
      const codes = Uint16Array.from({ length }, () => Math.floor(65_536 * random() ** 3));
      emptyHistogram(histogram);
      countCodes(histogram, codes, 0, length);
      for (const p of [0, 0.05, 0.5, 0.95, 1]) expect(histogramQuantile(histogram, length, p, plain)).toBeCloseTo(quantile(codes, p), 9);
    }
  });

  it("leave unknown ones out, and say nothing of nothing", () => {
    const histogram = createHistogram();
    expect(countKnown(histogram, Uint16Array.of(0, 9, 0, 5, 7), 0, 4)).toBe(2);
    expect(histogramQuantile(histogram, 2, 0.5, plain)).toBe(7);
    expect(histogramQuantile(histogram, 0, 0.5, plain)).toBeNaN();
  });
});

describe("small sets of vehicles", () => {
  it("count distinct members, alone and together, up to enough", () => {
    const sets = createDistinctSets(3, 50);
    sets.add(0, Uint32Array.of(7, 7, 0, 0xffffffff, 7), 0, 5);
    sets.add(1, Uint32Array.of(1, 2, 7, 8), 1, 4);
    expect([sets.count(0, 1), sets.count(1, 2), sets.count(2, 3), sets.count(0, 3)]).toEqual([3, 3, 0, 5]);
    sets.add(2, Uint32Array.from({ length: 400 }, (_, i) => i * 65_536), 0, 400);
    expect([sets.count(2, 3), sets.count(0, 3)]).toEqual([50, 50]);
    sets.clear();
    expect(sets.count(0, 3)).toBe(0);
  });

  it("count as a plain set does", () => {
    const random = seededRandom(4);
    const sets = createDistinctSets(4, 50);
    for (let round = 0; round < 50; round++) {
      sets.clear();
      const lists = Array.from({ length: 4 }, () => Uint32Array.from({ length: Math.floor(60 * random()) }, () => Math.floor(40 * random()) * 0x1000_0001));
      lists.forEach((list, set) => sets.add(set, list, 0, list.length));
      expect(sets.count(1, 4)).toBe(Math.min(50, new Set(lists.slice(1).flatMap((list) => [...list])).size));
    }
  });
});
