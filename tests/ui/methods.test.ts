import { describe, expect, it } from "vitest";
import { DEFINITIONS } from "@/ui/methods/definitions";
import { percentileWords } from "@/ui/methods/percentile-words";

describe("methods", () => {
  it("names percentiles with the right ending", () => {
    expect([0.2, 0.01, 0.22, 0.13, 0.83, 0.95].map(percentileWords)).toEqual([
      "20th percentile", "1st percentile", "22nd percentile", "13th percentile", "83rd percentile", "95th percentile",
    ]);
  });

  it("says the values that the core works with, and no gap where one was meant", () => {
    const text = DEFINITIONS.flatMap(({ meaning }) => meaning).join(" ");
    expect(text).toContain("250 m before the stop line");
    expect(text).toContain("below 5 km/h and ends above 10 km/h");
    expect(text).toContain("fills 90 % or more");
    expect(text).toContain("A mean below zero");
    expect(text).not.toMatch(/undefined|NaN|Infinity/);
  });
});
