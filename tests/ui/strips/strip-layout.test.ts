import { describe, expect, it } from "vitest";
import { layoutStrip, lengthTicks, niceStep, scalesOf, stripHeight, timeTicks } from "@/ui/strips/strip-layout";

const window = { fromS: 16 * 3600, toS: 18.5 * 3600, bottomM: 0, topM: 340 };

describe("layout of a strip", () => {
  it("keeps strip and delay on one time axis and inside the canvas, on a phone and on a desk", () => {
    for (const width of [320, 390, 720, 1440]) {
      const layout = layoutStrip(width, 300);
      expect(layout.delay.left).toBe(layout.plot.left);
      expect(layout.delay.width).toBe(layout.plot.width);
      expect(layout.plot.left + layout.plot.width).toBeLessThan(width);
      expect(layout.delay.top + layout.delay.height).toBeLessThan(layout.height);
    }
  });

  it("gives a phone most of its width and leaves the profile out", () => {
    expect(layoutStrip(390, 300).plot.width).toBeGreaterThan(300);
    expect(layoutStrip(390, 300).profile).toBeNull();
  });

  it("goes from time and distance to pixels and back", () => {
    const scales = scalesOf(layoutStrip(1000, 340).plot, window);
    expect(scales.tOf(scales.x(61_234))).toBeCloseTo(61_234, 6);
    expect(scales.sOf(scales.y(123))).toBeCloseTo(123, 6);
    // Upstream is up: 340 pixels for 340 m.
    expect(scales.y(0) - scales.y(100)).toBeCloseTo(100, 6);
  });

  it("never shrinks the strip below what can be read", () => {
    expect([stripHeight(400), stripHeight(900), stripHeight(2000)]).toEqual([270, 310, 520]);
  });
});

describe("ticks", () => {
  it("stand on whole local times, both ends included", () => {
    expect(timeTicks(window, 1000, 62).map((t) => t / 60)).toEqual([960, 970, 980, 990, 1000, 1010, 1020, 1030, 1040, 1050, 1060, 1070, 1080, 1090, 1100, 1110]);
    expect(timeTicks(window, 300, 62).map((t) => t / 60)).toEqual([960, 1020, 1080]);
  });

  it("count metres or feet from the stop line", () => {
    expect(lengthTicks(340, 380, "metric").map((tick) => tick.label)).toEqual(["0", "50", "100", "150", "200", "250", "300"]);
    const feet = lengthTicks(340, 380, "us");
    // 340 m are 1,115 ft.
    expect(feet.map((tick) => tick.label)).toEqual(["0", "200", "400", "600", "800", "1000"]);
    expect(feet[5].sM).toBeCloseTo(304.8, 3);
  });

  it("take steps of 1, 2 or 5", () => {
    expect([niceStep(100, 10), niceStep(95, 4), niceStep(0.7, 3), niceStep(30, 2)]).toEqual([10, 50, 0.5, 20]);
  });
});
