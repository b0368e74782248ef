import { describe, expect, it } from "vitest";
import { dayFromIso, isoFromDay, offsetMinAt, offsetTable, weekdayOf } from "@/domain/local-time";

// Daylight saving in the European Union begins at 01:00 UTC on the last Sunday of March (Directive 2000/84/EC).
const CHANGE = Date.parse("2026-03-29T01:00:00Z");

describe("local time", () => {
  it("knows the Azores an hour behind UTC in winter and level with it in summer", () => {
    expect(offsetMinAt("Atlantic/Azores", CHANGE - 1000)).toBe(-60);
    expect(offsetMinAt("Atlantic/Azores", CHANGE)).toBe(0);
  });

  it("finds the change of clocks to the minute", () => {
    const table = offsetTable("Atlantic/Azores", Date.parse("2026-03-01T00:00:00Z"), Date.parse("2026-04-15T00:00:00Z"));
    expect(table).toEqual([
      { fromMs: Date.parse("2026-03-01T00:00:00Z"), offsetMin: -60 },
      { fromMs: CHANGE, offsetMin: 0 },
    ]);
    expect(offsetTable("Atlantic/Azores", CHANGE - 60_000, CHANGE)[1]).toEqual({ fromMs: CHANGE, offsetMin: 0 });
  });

  it("numbers days from 1970 and back", () => {
    expect(dayFromIso("1970-01-02")).toBe(1);
    expect(isoFromDay(dayFromIso("2026-03-01"))).toBe("2026-03-01");
  });

  it("counts weekdays from Sunday", () => {
    expect(weekdayOf(dayFromIso("1970-01-01"))).toBe(4);
    expect(weekdayOf(dayFromIso("2026-03-02"))).toBe(1);
    expect(weekdayOf(dayFromIso("2026-03-07"))).toBe(6);
  });
});
