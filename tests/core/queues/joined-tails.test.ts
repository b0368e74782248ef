import { describe, expect, it } from "vitest";
import { columnReach } from "@/core/queues/column-reach";
import { fullFromM } from "@/core/queues/full-from";
import { joinedTails, tailAt } from "@/core/queues/joined-tails";
import { legQuarters } from "@/core/queues/leg-quarters";
import { DEFAULT_QUEUE_OPTIONS, QUARTER_MS } from "@/core/queues/options";
import { findStandings } from "@/core/queues/standings";
import { oneLeg, passing, stopping, traversalsOf, type TestCourse } from "./one-leg";

const START = 1000 * QUARTER_MS;

/** Stands at each of the places for the seconds given and drives 10 m/s between them. */
function movingUp(enterMs: number, waits: [number, number][]): TestCourse {
  const points: [number, number][] = [[0, 250]];
  let t = (250 - waits[0][0]) / 10;
  waits.forEach(([s, seconds], n) => {
    points.push([t, s], [t + seconds, s]);
    t += seconds + (s - (waits[n + 1]?.[0] ?? -15)) / 10;
  });
  return { enterMs, points: [...points, [t, -15]] };
}

const standingsOfCourses = (courses: TestCourse[]) => findStandings(oneLeg(), traversalsOf(courses), DEFAULT_QUEUE_OPTIONS);

describe("vehicles that move up", () => {
  it("joined their queue with the first stop, and belong to it whoever else was seen", () => {
    const found = standingsOfCourses([movingUp(START, [[200, 40], [150, 40], [90, 30]])]);
    expect([...found.s]).toEqual([200, 150, 90]);
    // 50 m at 10 m/s: it stood in all three places from second 5 on.
    expect([...found.joinedMs].map((ms) => (ms - START) / 1000)).toEqual([5, 5, 5]);
    expect([...found.isQueuing]).toEqual([1, 1, 1]);
    const q = legQuarters(oneLeg(), traversalsOf([movingUp(START, [[200, 40], [150, 40], [90, 30]])]));
    expect(q.reachM[0]).toBe(200);
  });

  it("are not taken for queued where they only gave way for a moment, or stood far apart", () => {
    expect([...standingsOfCourses([movingUp(START, [[200, 5], [150, 20]])]).isQueuing]).toEqual([0, 0]);
    const apart = standingsOfCourses([movingUp(START, [[240, 60], [100, 60]])]);
    expect([...apart.isQueuing]).toEqual([0, 0]);
    expect([...apart.joinedMs]).toEqual([...apart.fromMs]);
  });

  it("say nothing of the leg once they drive off: others stand behind them", () => {
    const observed = (course: TestCourse): number => legQuarters(oneLeg(), traversalsOf([course])).observedS[0];
    // Seen from 30 s before it came: 0 s to the departure from 90 m at 5 + 40 + 5 + 40 + 6 + 30 = 126 s.
    expect(observed(movingUp(START + 60_000, [[200, 40], [150, 40], [90, 30]]))).toBeCloseTo(156, -1);
    // One stop: until 30 s after the line, 5 + 40 + 21.5 s.
    expect(observed(movingUp(START + 60_000, [[200, 40]]))).toBeCloseTo(126.5, -1);
  });
});

describe("joinedTails", () => {
  it("goes evenly from one who joins to the next while the first still stands", () => {
    const found = standingsOfCourses([stopping(START, 40, 60), stopping(START + 40_000, 96, 60)]);
    const [alone, between] = joinedTails(found, 0, found.length, DEFAULT_QUEUE_OPTIONS);
    // Arrive after (250 - 40) / 14 = 15 s and 40 + (250 - 96) / 14 = 51 s.
    expect((between.fromMs - START) / 1000).toBeCloseTo(15, 0);
    expect((between.toMs - START) / 1000).toBeCloseTo(51, 0);
    expect(tailAt(between, (between.fromMs + between.toMs) / 2, 0)).toBeCloseTo(68, 5);
    expect(tailAt(between, between.toMs + 1, 1)).toBe(0);
    // Before the first the queue grew: 40 m less 20 s at 0.5 m/s.
    expect(tailAt(alone, alone.toMs - 20_000, 0.5)).toBeCloseTo(30, 5);
    expect(tailAt(alone, alone.toMs - 20_000, 0)).toBe(0);
  });

  it("does not join queues of different reds, nor a vehicle that stands alone far away", () => {
    const reds = standingsOfCourses([stopping(START, 40, 20), stopping(START + 90_000, 96, 30)]);
    expect(joinedTails(reds, 0, reds.length, DEFAULT_QUEUE_OPTIONS).map((span) => span.fromM)).toEqual([NaN, NaN]);
    const parked = standingsOfCourses([stopping(START, 8, 60), stopping(START + 10_000, 200, 30)]);
    expect(joinedTails(parked, 0, parked.length, DEFAULT_QUEUE_OPTIONS).length).toBe(1);
  });
});

describe("a full leg", () => {
  it("is full from nine tenths on, or from half a vehicle's road before its end; three vehicles are too few to say", () => {
    expect(fullFromM(200, DEFAULT_QUEUE_OPTIONS)).toBeCloseTo(180, 9);
    expect(fullFromM(30, DEFAULT_QUEUE_OPTIONS)).toBeCloseTo(26.19, 9);
    expect(fullFromM(22, DEFAULT_QUEUE_OPTIONS)).toBeNaN();
    expect(fullFromM(NaN, DEFAULT_QUEUE_OPTIONS)).toBeNaN();
  });

  it("needs half a vehicle's road more where its last vehicle stood once", () => {
    // Nine tenths of 60 m are 54 m: what looks like 55 m may be 51.2 m, and in 20 s only a metre is expected to join.
    const once = legQuarters(oneLeg(60), traversalsOf([stopping(START, 8, 60), stopping(START + 5000, 55, 20)]));
    expect(once.spilledS[0]).toBe(0);
    const far = legQuarters(oneLeg(60), traversalsOf([stopping(START, 8, 60), stopping(START + 5000, 59, 50)]));
    expect(far.spilledS[0]).toBeGreaterThanOrEqual(45);
    const again = legQuarters(oneLeg(60), traversalsOf([movingUp(START, [[56, 50], [30, 40]]), passing(START + 400_000)]));
    expect(again.spilledS[0]).toBeGreaterThanOrEqual(45);
  });
});

describe("columnReach with a vehicle known to queue", () => {
  it("hangs together up to it, and on from it by the gap", () => {
    expect(columnReach([180, 250, 400], 3, 100, 120, 180)).toBe(250);
    expect(columnReach([180, 250, 400], 3, 100, 120)).toBe(0);
  });
});
