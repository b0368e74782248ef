import { describe, expect, it } from "vitest";
import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import { createFrame } from "@/core/legs/frame";
import { joinArms } from "@/core/legs/join";
import type { Arm } from "@/core/legs/trace";

const a = { id: "A", lat: 45.6, lon: -38.3 };
const plane = planeAt(a.lat, a.lon);

/** Junctions 400 m from A in two directions, and the traces of the legs that lead straight there from A. */
function fork(first: number, second: number): { frame: ReturnType<typeof createFrame>; arms: Arm[] } {
  const places = [first, second].map((deg) => [Math.sin((deg * Math.PI) / 180), Math.cos((deg * Math.PI) / 180)]);
  const others = places.map(([x, y], i) => ({ id: `B${i}`, lat: latAt(plane, 400 * y), lon: lonAt(plane, 400 * x) }));
  const arms = places.map(([x, y], i): Arm => ({ junction: i + 1, inbound: true, support: 9, line: [-14 * x, -14 * y, -386 * x, -386 * y], meets: 0 }));
  return { frame: createFrame([a, ...others], 1000), arms };
}

describe("streets that leave a junction at a sharp angle to each other", () => {
  it("are two exits where each leads to a junction of its own, 21 degrees apart", () => {
    const { frame, arms } = fork(60, 81);
    const { legs, exits } = joinArms(arms, frame);
    expect(exits.map((exit) => Math.round(exit.bearingDeg))).toEqual([60, 81]);
    expect(legs.map((leg) => leg.upstreamExit)).toEqual([0, 1]);
  });

  it("are one exit where they part by 8 degrees: a street that forks farther on", () => {
    const { frame, arms } = fork(60, 68);
    const { legs, exits } = joinArms(arms, frame);
    expect(exits).toHaveLength(1);
    expect(legs.map((leg) => leg.upstreamExit)).toEqual([0, 0]);
  });
});
