import { describe, expect, it } from "vitest";
import { dayFromIso, isoFromDay, localDayOf, msFromLocal, offsetMinAt, offsetTable, weekdayOf } from "@/domain/local-time";

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
  });

  it("puts a moment before local midnight on the day before", () => {
    expect(isoFromDay(localDayOf("Atlantic/Azores", Date.parse("2026-03-02T00:30:00Z")))).toBe("2026-03-01");
    expect(isoFromDay(localDayOf("UTC", Date.parse("2026-03-02T00:30:00Z")))).toBe("2026-03-02");
  });

  it("goes from local wall time to the moment and back", () => {
    const day = dayFromIso("2026-03-30");
    expect(new Date(msFromLocal("Europe/Berlin", day, 8 * 60 + 30)).toISOString()).toBe("2026-03-30T06:30:00.000Z");
    expect(new Date(msFromLocal("America/New_York", dayFromIso("2026-01-15"), 0)).toISOString()).toBe("2026-01-15T05:00:00.000Z");
  });

  it("counts weekdays from Sunday", () => {
    expect(weekdayOf(dayFromIso("1970-01-01"))).toBe(4);
    expect(weekdayOf(dayFromIso("2026-03-02"))).toBe(1);
    expect(weekdayOf(dayFromIso("2026-03-07"))).toBe(6);
  });
});
