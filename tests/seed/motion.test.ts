import { describe, expect, it } from "vitest";
import { createMotion, SMOOTHING_S } from "@seed/probes/motion";

/** Drives 14 m/s for 10 s, stands 20 s at 140 m, drives on for 10 s. */
const recording = { timeS: [0, 10, 30, 40], distanceM: [0, 140, 140, 280], pieces: [], pieceStartM: [] };

describe("a probe vehicle's motion", () => {
  it("stands exactly where its Newell path stands", () => {
    const motion = createMotion(recording);
    motion.at(20);
    expect(motion.distanceM).toBeCloseTo(140, 9);
    expect(motion.speedMs).toBe(0);
  });

  it("does not move before the path does, and is up to speed after the smoothing time", () => {
    const motion = createMotion(recording);
    motion.at(30);
    expect(motion.distanceM).toBeCloseTo(140, 9);
    motion.at(30 + SMOOTHING_S);
    // From rest at an even 2.8 m/s2 for 5 s: 35 m and 14 m/s.
    expect(motion.distanceM).toBeCloseTo(140 + 35, 9);
    expect(motion.speedMs).toBeCloseTo(14, 9);
  });

  it("changes speed by no more than 2.8 m/s in a second and never runs backwards", () => {
    const motion = createMotion(recording);
    let [lastM, lastMs] = [0, 0];
    for (let t = 0; t <= 45; t++) {
      motion.at(t);
      expect(Math.abs(motion.speedMs - lastMs)).toBeLessThanOrEqual(2.8 + 1e-9);
      expect(motion.distanceM).toBeGreaterThanOrEqual(lastM - 1e-9);
      [lastM, lastMs] = [motion.distanceM, motion.speedMs];
    }
    expect(lastM).toBeCloseTo(280, 9);
  });
});
