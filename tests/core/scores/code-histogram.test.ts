import { describe, expect, it } from "vitest";
import { addCode, createHistogram, emptyHistogram, histogramQuantile } from "@/core/scores/code-histogram";
import { createDistinctSets, type DistinctSets } from "@/core/scores/distinct-sets";
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
      for (const code of codes) addCode(histogram, code);
      for (const p of [0, 0.05, 0.5, 0.95, 1]) expect(histogramQuantile(histogram, length, p, plain)).toBeCloseTo(quantile(codes, p), 9);
    }
  });

  it("say nothing of nothing", () => {
    expect(histogramQuantile(createHistogram(), 0, 0.5, plain)).toBeNaN();
  });
});

describe("small sets of vehicles", () => {
  const words = (sets: readonly number[]): Uint32Array => Uint32Array.from(sets, (set) => (set << 24) >>> 0);
  const all = Uint8Array.of(1, 1, 1, 1);
  const add = (sets: DistinctSets, set: number, values: readonly number[]): void =>
    sets.addEntries(words(values.map(() => set)), Uint16Array.from(values), 0, values.length);

  it("count distinct members, alone and together, up to enough", () => {
    const sets = createDistinctSets(3, 50);
    sets.begin(all);
    add(sets, 0, [7, 7, 0, 0xffff, 7]);
    add(sets, 1, [2, 7, 8]);
    expect([sets.count(0, 1), sets.count(1, 2), sets.count(2, 3), sets.count(0, 3)]).toEqual([3, 3, 0, 5]);
    add(sets, 2, Array.from({ length: 400 }, (_, i) => i));
    expect([sets.count(2, 3), sets.count(0, 3)]).toEqual([50, 50]);
    sets.begin(all);
    expect(sets.count(0, 3)).toBe(0);
  });

  it("leave out movements that are not wanted", () => {
    const sets = createDistinctSets(3, 50);
    sets.begin(Uint8Array.of(0, 1, 1));
    sets.addEntries(words([0, 1, 0]), Uint16Array.of(5, 6, 7), 0, 3);
    expect([sets.count(0, 1), sets.count(1, 2)]).toEqual([0, 1]);
  });

  it("count as a plain set does", () => {
    const random = seededRandom(4);
    const sets = createDistinctSets(4, 50);
    for (let round = 0; round < 50; round++) {
      sets.begin(all);
      const lists = Array.from({ length: 4 }, () => Array.from({ length: Math.floor(60 * random()) }, () => Math.floor(40 * random()) * 1001));
      lists.forEach((list, set) => sets.addEntries(words(list.map(() => set)), Uint16Array.from(list), 0, list.length));
      expect(sets.count(1, 4)).toBe(Math.min(50, new Set(lists.slice(1).flat()).size));
    }
  });
});
