import { describe, expect, it } from "vitest";
import { legQuarters } from "@/core/queues/leg-quarters";
import { reachOfDays, spillShare } from "@/core/strips/reach-of-days";
import { tailLine } from "@/core/strips/tail-line";
import { networkOf, traversalsOf } from "./as-traversals";
import { driveStreet, setOf, type ToyTrack } from "./support";

/** Drives at 10 m/s, stands at `sM` from `fromS` to `toS`, drives on past the stop line. */
function stander(day: number, sM: number, fromS: number, toS: number): ToyTrack {
  return { day, points: [[fromS - (300 - sM) / 10, 300], [fromS, sM], [toS, sM], [toS + (sM + 40) / 10, -40]] };
}

const at = (reaches: { reachM: Float32Array; stepS: number }, tS: number) => reaches.reachM[Math.floor(tS / reaches.stepS)];

describe("reach of days", () => {
  it("is the farthest standing vehicle that hangs together with the stop line", () => {
    const day = setOf([stander(1, 20, 100, 160), stander(1, 90, 120, 165), stander(1, 230, 120, 165)]);
    const reaches = reachOfDays(day, 0, 400, 280);
    expect(at(reaches, 110)).toBe(20);
    // 230 m stands 140 m behind the next: not the same column.
    expect(at(reaches, 140)).toBe(90);
    // A stop is remembered for 40 s.
    expect(at(reaches, 190)).toBe(90);
    expect(at(reaches, 212)).toBe(0);
  });

  it("says nothing where nobody was on the leg, and 0 where vehicles passed without standing", () => {
    const reaches = reachOfDays(setOf([{ day: 1, points: [[100, 300], [134, -40]] }]), 0, 400, 280);
    expect(at(reaches, 50)).toBeNaN();
    expect(at(reaches, 120)).toBe(0);
    expect(at(reaches, 200)).toBeNaN();
  });

  it("leaves out those who wait in the upstream junction's box", () => {
    const reaches = reachOfDays(setOf([stander(1, 20, 100, 160), stander(1, 60, 100, 160), stander(1, 105, 100, 160)]), 0, 400, 100);
    expect(at(reaches, 140)).toBe(60);
  });

  it("keeps days apart", () => {
    const reaches = reachOfDays(setOf([stander(1, 20, 100, 160), stander(2, 110, 100, 160)]), 0, 400, 280);
    expect([...reaches.days]).toEqual([1, 2]);
    expect(reaches.reachM[Math.floor(140 / 5)]).toBe(20);
    // Alone at 110 m, beyond the 100 m within which a head must stand.
    expect(reaches.reachM[reaches.steps + Math.floor(140 / 5)]).toBe(0);
  });

  it("has the share of time spilled back that the stored quarters have", () => {
    const tracks = driveStreet({ lengthM: 260, freeMs: 13, cycleS: 90, greenS: 30, headwayS: 5, vehicles: 200 });
    const set = setOf(tracks);
    const quarters = legQuarters(networkOf(200), traversalsOf(set));
    const total = (values: Float32Array) => values.reduce((sum, value) => sum + value, 0);
    const stored = total(quarters.spilledS) / total(quarters.observedS);
    const fromS = quarters.startMs[0] / 1000;
    const read = spillShare(reachOfDays(set, fromS, fromS + quarters.length * 900, 200), 200);
    expect(stored).toBeGreaterThan(0.1);
    expect(read).toBeCloseTo(stored, 9);
  });
});

describe("tail line", () => {
  it("shows a single day's own farthest reach, without an interval", () => {
    const reaches = reachOfDays(setOf([stander(1, 20, 100, 165), stander(1, 90, 120, 165)]), 0, 400, 280);
    const line = tailLine(reaches, 100);
    expect([...line.reachM]).toEqual([0, 90, 90, NaN]);
    expect(line.lowM[1]).toBeNaN();
  });

  it("is the 95th percentile over days, type 7, with its span from their order", () => {
    // 21 days with reaches 0, 1, ... 20 m: position 0.95 * 20 = 19.
    const reachM = Float32Array.from({ length: 21 }, (_, day) => day);
    const line = tailLine({ fromS: 0, stepS: 5, steps: 1, days: new Int32Array(21).map((_, i) => i), reachM }, 5);
    expect(line.reachM[0]).toBe(19);
    // Wilson's interval of 0.95 with n = 21, 0.77001 to 0.99081 (Wilson 1927), read as quantiles: 20 times each.
    expect(line.lowM[0]).toBeCloseTo(15.4003, 3);
    expect(line.highM[0]).toBeCloseTo(19.8162, 3);
    expect(line.samples[0]).toBe(21);
  });

  it("lends nothing to a column that no day saw", () => {
    const reachM = new Float32Array(2 * 40).fill(10);
    reachM[5] = NaN;
    reachM[40 + 5] = NaN;
    const line = tailLine({ fromS: 0, stepS: 60, steps: 40, days: Int32Array.of(1, 2), reachM }, 60);
    expect(line.reachM[5]).toBeNaN();
    expect(line.samples[5]).toBe(0);
    expect(line.reachM[6]).toBe(10);
  });

  it("borrows from neighbours up to 7.5 minutes away while samples are few", () => {
    const days = Int32Array.of(1, 2);
    const reachM = new Float32Array(2 * 40).fill(10);
    reachM[20] = 100;
    const line = tailLine({ fromS: 0, stepS: 60, steps: 40, days, reachM }, 60);
    // Two days see each minute: 2 of its own and 4 with every pair of neighbours; five pairs make 22.
    expect(line.samples[20]).toBe(22);
    // At the edge neighbours stand on one side only: 2 + 7 * 2 = 16 is all that lies within 7.5 minutes.
    expect(line.samples[0]).toBe(16);
    // Position 0.95 * 21 = 19.95 of 21 tens and one hundred; the interval reaches between the last two.
    expect(line.reachM[20]).toBe(10);
    expect(line.highM[20]).toBeGreaterThan(50);
  });

});
