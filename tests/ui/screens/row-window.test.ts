import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { rowsInView } from "@/ui/screens/use-row-window";

describe("rows in view", () => {
  it("draws the rows of the view with twelve beyond each end, in chunks of eight", () => {
    expect(rowsInView(0, 480, 48, 1000)).toEqual({ start: 0, end: 24 });
    expect(rowsInView(4800, 5280, 48, 1000)).toEqual({ start: 88, end: 128 });
  });

  it("stays within the list, wherever the view is", () => {
    const px = fc.integer({ min: -100_000, max: 100_000 });
    fc.assert(
      fc.property(px, fc.nat(2000), fc.nat(1500), (top, height, count) => {
        const { start, end } = rowsInView(top, top + height, 48, count);
        expect(0 <= start && start <= end && end <= count).toBe(true);
        for (let row = 0; row < count; row++) {
          const isVisible = (row + 1) * 48 > top && row * 48 < top + height;
          if (isVisible) expect(row >= start && row < end).toBe(true);
        }
      }),
      { numRuns: 60 },
    );
  });
});
