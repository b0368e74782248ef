import { describe, expect, it } from "vitest";
import { createDistinctCounter } from "@/core/stats/distinct-counter";
import { seededRandom } from "@/core/stats/random";

describe("distinct counter", () => {
  it("counts each value of a stretch once", () => {
    const counter = createDistinctCounter(6);
    const values = Uint32Array.of(7, 7, 0, 4294967295, 0, 9);
    expect(counter.count(values, 0, 6)).toBe(4);
    expect(counter.count(values, 0, 2)).toBe(1);
    expect(counter.count(values, 3, 3)).toBe(0);
  });

  it("stops at as many as are enough", () => {
    const counter = createDistinctCounter(5);
    const values = Uint32Array.of(3, 3, 5, 8, 13);
    expect([1, 2, 3, 4, 5].map((enough) => counter.count(values, 0, 5, enough))).toEqual([1, 2, 3, 4, 4]);
  });

  it("agrees with a set from call to call", () => {
    const random = seededRandom(9);
    const values = Uint32Array.from({ length: 3000 }, () => Math.floor(random() * 700) * 65_536);
    const counter = createDistinctCounter(values.length);
    for (let round = 0; round < 50; round++) {
      const from = Math.floor(random() * values.length);
      const to = from + Math.floor(random() * (values.length - from));
      expect(counter.count(values, from, to)).toBe(new Set(values.subarray(from, to)).size);
    }
  });
});
