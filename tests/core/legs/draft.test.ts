import { describe, expect, it } from "vitest";
import { exitBearingDeg, legBearingDeg } from "@/core/legs/draft";

describe("bearings at a junction", () => {
  it("are read off beyond the box, where a line does not bend with those who turn", () => {
    // The first 8 m lead north-east, the rest due north.
    const bent = Float64Array.from([0, 0, 6, 6, 6, 60]);
    expect(exitBearingDeg(bent)).toBeCloseTo(0.8, 0);
    expect(legBearingDeg(bent)).toBeCloseTo(180.8, 0);
  });

  it("use three quarters of a line that is too short for that", () => {
    // 20 m: five east, fifteen north.
    expect(exitBearingDeg(Float64Array.from([0, 0, 5, 0, 5, 15]))).toBeCloseTo(0, 6);
  });
});
