import { describe, expect, it } from "vitest";
import { normalRandom, seededRandom } from "@/core/stats/random";
import { rankIntervals } from "@/core/stats/rank-draws";

/** The same draws, ranked by sorting. */
function byTheBook(value: number[], sd: number[], draws: number, seed: number): { low: number[]; high: number[] } {
  const normal = normalRandom(seededRandom(seed));
  const ranks = value.map((): number[] => []);
  for (let d = 0; d < draws; d++) {
    const drawn = value.map((mean, i) => mean + sd[i] * normal());
    const sorted = [...drawn].sort((a, b) => b - a);
    drawn.forEach((x, i) => ranks[i].push(1 + sorted.indexOf(x)));
  }
  for (const list of ranks) list.sort((a, b) => a - b);
  return { low: ranks.map((list) => list[Math.floor(0.025 * draws)]), high: ranks.map((list) => list[Math.ceil(0.975 * draws) - 1]) };
}

describe("intervals of many ranks", () => {
  it("are those of sorted draws, to a rank where values are as good as equal", () => {
    const units = 400;
    const value = Array.from({ length: units }, (_, i) => 3 + 0.6 * Math.sin(12.9898 * i));
    const sd = value.map((_, i) => 0.03 + 0.01 * ((37 * i) % 11));
    const ours = rankIntervals(value, sd, { draws: 400, seed: 9 });
    const exact = byTheBook(value, sd, 400, 9);
    for (let i = 0; i < units; i++) {
      expect(Math.abs(ours.low[i] - exact.low[i])).toBeLessThanOrEqual(1);
      expect(Math.abs(ours.high[i] - exact.high[i])).toBeLessThanOrEqual(1);
    }
  });
});
