import { describe, expect, it } from "vitest";
import * as format from "@/ui/format";

const GB = "en-GB";

describe("numbers for people", () => {
  it("shows a dash, never a zero, where the sample cannot say", () => {
    expect(format.formatSeconds(null, GB)).toBe("–");
    expect(format.formatNumber(NaN, GB)).toBe("–");
    expect(format.formatLength(undefined, "metric", GB)).toBe("–");
    expect(format.formatShare(null, GB)).toBe("–");
  });

  it("groups thousands and never writes minus zero", () => {
    expect(format.formatNumber(12345, GB)).toBe("12,345");
    expect(format.formatNumber(-0.2, GB)).toBe("0");
  });

  it("keeps a decimal for a share below one per cent", () => {
    expect(format.formatShare(0.004, GB)).toBe("0.4 %");
    expect(format.formatShare(0, GB)).toBe("0 %");
    expect(format.formatShare(0.218, GB)).toBe("22 %");
  });

  it("converts by the international foot (0.3048 m) and mile (1609.344 m)", () => {
    expect(format.formatLength(304.8, "us", GB)).toBe("1,000 ft");
    expect(format.formatSpeed(1609.344 / 3600, "us", GB)).toBe("1 mph");
    expect(format.formatSpeed(10, "metric", GB)).toBe("36 km/h");
  });

  it("counts in the singular and the plural", () => {
    expect(format.counted(1, "junction", "junctions", GB)).toBe("1 junction");
    expect(format.counted(1500, "junction", "junctions", GB)).toBe("1,500 junctions");
  });
});

describe("times and dates", () => {
  it("writes minutes after midnight as a clock, the day's end as 24:00", () => {
    expect(format.formatClockRange(960, 1110)).toBe("16:00 to 18:30");
    expect(format.formatClock(1440)).toBe("24:00");
  });

  it("leaves a local calendar day where it is", () => {
    expect(format.formatDay("2026-03-02", GB)).toBe("2 March 2026");
    expect(format.formatDayRange("2026-03-02", "2026-03-07", GB)).toBe("2 to 7 March 2026");
    expect(format.formatDayRange("2026-03-02", "2026-03-02", GB)).toBe("2 March 2026");
  });

  it("shows an instant in the city's zone (Azores: UTC-1 in winter)", () => {
    expect(format.formatInstant("2026-01-10T00:30:00Z", GB, "Atlantic/Azores")).toBe("9 Jan 2026, 23:30");
  });
});

describe("compass points", () => {
  it("rounds to the nearest of eight, round the full circle", () => {
    expect([0, 22, 23, 180, 270, 350, -90].map(format.compassPoint)).toEqual(["north", "north", "north-east", "south", "west", "north", "west"]);
  });
});
