import { describe, expect, it } from "vitest";
import { filledEndMs, filledStartMs } from "@/core/traversals/fill-ends";
import { courseOf } from "./courses";

describe("trips that begin or end inside a window", () => {
  it("drives the missing part at free speed", () => {
    expect(filledStartMs(courseOf([[100, 0, 36]]), 60, 10, 15, true)).toBe(94_000);
  });

  // 60 m at 10 m/s are 6 s, braking to a stand loses 1.923 s, half of the other 22.077 s of the interval is waited.
  it("lets a slow first ping have waited half of what is left of the interval", () => {
    expect(filledStartMs(courseOf([[100, 0, 0]]), 60, 10, 30, true) / 1000).toBeCloseTo(100 - 6 - 1.923 - 22.077 / 2, 2);
  });

  it("refuses a start that would have shown an earlier ping, or one in mid-trip", () => {
    expect(filledStartMs(courseOf([[100, 0, 36]]), 60, 10, 5, true)).toBeNaN();
    expect(filledStartMs(courseOf([[100, 0, 0]]), 20, 10, 30, false)).toBeNaN();
  });

  // From 5 to 10 m/s at 1.9 m/s2: 2.632 s and 19.737 m; 40.263 m more at 10 m/s.
  it("speeds up over the missing end", () => {
    expect(filledEndMs(courseOf([[100, 0, 18]]), 60, 10, 15, true) / 1000).toBeCloseTo(100 + 2.632 + 4.026, 2);
    expect(filledEndMs(courseOf([[100, 0, 18]]), 60, 10, 3, true)).toBeNaN();
  });
});
