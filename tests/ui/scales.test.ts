import { describe, expect, it } from "vitest";
import { DELAY_SCALE, delayColor, NO_DATA_COLOR, speedColor, SPEED_RAMP } from "@/ui/scales";

describe("delay scale", () => {
  it("steps at the level-of-service bounds of HCM 7, Exhibit 19-8", () => {
    expect(DELAY_SCALE.map((step) => step.from)).toEqual([0, 10, 20, 35, 55, 80]);
  });

  it("gives a bound to the step that it opens", () => {
    expect(delayColor(34.9)).toBe(DELAY_SCALE[2].color);
    expect(delayColor(35)).toBe(DELAY_SCALE[3].color);
    expect(delayColor(500)).toBe(DELAY_SCALE[5].color);
  });

  it("keeps negative delay on the scale and missing delay off it", () => {
    expect(delayColor(-3)).toBe(DELAY_SCALE[0].color);
    for (const missing of [NaN, null, undefined]) expect(delayColor(missing)).toBe(NO_DATA_COLOR);
    expect(DELAY_SCALE.map((step) => step.color)).not.toContain(NO_DATA_COLOR);
  });

  it("darkens from step to step", () => {
    const light = DELAY_SCALE.map(({ color }) => [1, 3, 5].reduce((sum, at) => sum + parseInt(color.slice(at, at + 2), 16), 0));
    expect(light).toEqual([...light].sort((a, b) => b - a));
  });
});

describe("speed ramp", () => {
  it("runs from plum to cream, clamped at both ends", () => {
    expect(speedColor(-1)).toBe("#2D0B3F");
    expect(speedColor(0)).toBe("#2D0B3F");
    expect(speedColor(2)).toBe("#FBEFD2");
  });

  it("mixes half-way between two steps", () => {
    expect(SPEED_RAMP[0].color).toBe("#2D0B3F");
    expect(speedColor(0.1)).toBe("#4C1551");
  });

  it("answers grey where nothing was seen", () => {
    expect(speedColor(NaN)).toBe(NO_DATA_COLOR);
  });
});
