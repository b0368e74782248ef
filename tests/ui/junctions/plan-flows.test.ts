import { describe, expect, it } from "vitest";
import type { ExitView, LegView, MovementView } from "@/domain/junction";
import { flowsOf } from "@/ui/junctions/plan-flows";
import { planScale } from "@/ui/junctions/plan-geometry";

const leg = { id: 1, line: [[2, -15], [2, -300]] } as unknown as LegView;
const exits = [
  { id: 7, line: [[-15, 2], [-300, 2]] },
  { id: 8, line: [[2, 15], [2, 300]] },
  { id: 9, line: [[15, -2], [300, -2]] },
] as unknown as ExitView[];
const movement = (id: number, exitId: number, turnDeg: number, vehicles: number) => ({ id, legId: 1, exitId, turnDeg, vehicles, turn: "through" }) as MovementView;
const scale = planScale(50, 400, 25);

describe("bands of a plan", () => {
  const flows = flowsOf({ legs: [leg], exits, movements: [movement(1, 7, -90, 50), movement(2, 8, 0, 200), movement(3, 9, 90, 0), movement(4, 9, 90, 1)] }, scale);
  const startX = (id: number) => Number(/^M([\d.]+)/.exec(flows.find((flow) => flow.movement.id === id)?.path ?? "")?.[1]);

  it("are as wide as the vehicles that they carry, and leave out movements that nobody made", () => {
    expect(flows.map((flow) => flow.movement.id)).toEqual([1, 2, 4]);
    expect(flows[1].widthPx / flows[0].widthPx).toBeCloseTo(4, 9);
    expect(flows[2].widthPx).toBeGreaterThan(1);
  });

  it("lie side by side on the leg, left turns on the left", () => {
    expect(startX(1)).toBeLessThan(startX(2));
    expect(startX(2)).toBeLessThan(startX(4));
    // Half a band each and a gap of 1.5 pixels.
    expect(startX(2) - startX(1)).toBeCloseTo((flows[0].widthPx + flows[1].widthPx) / 2 + 1.5, 0);
  });

  it("point where their exit leads", () => {
    expect(flows.map((flow) => flow.headingDeg)).toEqual([-90, 0, 90]);
    expect(flows[1].tip[1]).toBeLessThan(200);
  });

  it("skips a movement whose leg or exit is not known", () => {
    expect(flowsOf({ legs: [], exits, movements: [movement(1, 7, -90, 50)] }, scale)).toEqual([]);
  });
});
