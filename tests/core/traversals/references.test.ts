import { describe, expect, it } from "vitest";
import { builtReferenceS, setReferences, turnAllowanceS } from "@/core/traversals/references";
import { createTraversalBuilder } from "@/core/traversals/columns";
import { listMovements } from "@/core/legs/movements";
import { draftExit, draftLeg } from "@/core/legs/draft";
import { createFrame } from "@/core/legs/frame";
import type { Network, Traversals } from "@/core/types";

/** One junction, one leg from the south of 300 m, exits north and east; window 250 + 28 + 60 m straight on, 10 m/s. */
function network(): Network {
  const junctions = [{ id: "A", lat: 45.6, lon: -38.3 }];
  const frame = createFrame(junctions, 1000);
  const leg = { ...draftLeg(frame, 0, Float64Array.from([0, -14, 0, -314]), 50), freeSpeedMs: 10 };
  const exits = [
    draftExit(frame, 0, Float64Array.from([0, 14, 0, 200]), 30),
    draftExit(frame, 0, Float64Array.from([14, 0, 200, 0]), 30),
  ];
  const base = { junctions, legs: [leg], exits, driveSide: "right" as const };
  return { ...base, movements: listMovements(base) };
}

/** Through traversals that drive evenly for the given seconds; `stopped` of them stood instead. */
function traversalsOf(seconds: number[], stopped: number[] = []): Traversals {
  const builder = createTraversalBuilder();
  [...seconds, ...stopped].forEach((s, vehicle) => {
    const track = Float64Array.from([0, s * 1000]);
    builder.add(
      { movement: 0, vehicle, enterMs: 0, stopLineMs: 0, exitMs: s * 1000, stops: vehicle < seconds.length ? 0 : 1, stoppedS: 0, farthestStopM: NaN, flags: 0 },
      track, Float64Array.from([250, -88]), 2,
    );
  });
  return builder.finish();
}

describe("references", () => {
  it("builds a time from free speed and turn where no unhindered vehicle was seen", () => {
    const city = network();
    setReferences(city, traversalsOf([], [90, 120]));
    expect(city.movements[0]).toMatchObject({ turn: "through", referenceSource: "free-speed", referenceN: 0 });
    expect(city.movements[0].referenceS).toBeCloseTo(33.8, 6);
    expect(city.movements[1].turn).toBe("right");
    expect(city.movements[1].referenceS).toBeCloseTo((250 + Math.hypot(14, 14) + 60) / 10 + turnAllowanceS(90), 6);
  });

  it("keeps delays below zero", () => {
    const city = network();
    const traversals = traversalsOf([], [30, 60]);
    setReferences(city, traversals);
    expect(traversals.delayS[0]).toBeCloseTo(30 - 33.8, 4);
    expect(traversals.delayS[1]).toBeCloseTo(60 - 33.8, 4);
  });

  it("moves towards what many unhindered vehicles need, and is never sure of a few", () => {
    const many = network();
    setReferences(many, traversalsOf(Array.from({ length: 400 }, () => 32)));
    expect(Math.abs(many.movements[0].referenceS - 32)).toBeLessThan(0.1);
    expect(many.movements[0]).toMatchObject({ referenceSource: "unstopped", referenceN: 400 });
    const few = network();
    setReferences(few, traversalsOf([32, 32]));
    expect(few.movements[0].referenceS).toBeGreaterThan(32.5);
    expect(few.movements[0].referenceSource).toBe("shrunk");
  });

  it("takes no reference from vehicles that crawl without standing: 338 m in 80 s", () => {
    const city = network();
    setReferences(city, traversalsOf(Array.from({ length: 50 }, () => 80)));
    expect(city.movements[0].referenceS).toBeCloseTo(33.8, 6);
  });

  it("is never faster than the speed limit", () => {
    const city = network();
    city.legs[0].speedLimitMs = 8;
    setReferences(city, traversalsOf(Array.from({ length: 400 }, () => 32)));
    expect(city.movements[0].referenceS).toBeCloseTo(338 / 8, 6);
  });

  it("gives the same answer when it runs twice", () => {
    const city = network();
    const traversals = traversalsOf([31, 33, 35], [70]);
    setReferences(city, traversals);
    const first = city.movements.map((m) => m.referenceS);
    setReferences(city, traversals);
    expect(city.movements.map((m) => m.referenceS)).toEqual(first);
    expect(builtReferenceS(city, city.movements[0])).toBeCloseTo(33.8, 6);
  });
});
