import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { TimeFormat } from "@/domain/upload";
import { parseNumber } from "@/formats/csv/parse-number";
import { timeParser } from "@/formats/time/parse-time";

const bytesOf = (text: string) => new TextEncoder().encode(text);
const number = (text: string, decimal = ".") => parseNumber(bytesOf(text), 0, text.length, decimal.charCodeAt(0));
const time = (text: string, format: TimeFormat, zone = "UTC") => {
  const tMs = timeParser(format, zone, 46)(bytesOf(text), 0, bytesOf(text).length);
  return Number.isNaN(tMs) ? null : new Date(tMs).toISOString();
};

describe("parseNumber", () => {
  it("agrees to the last bit with Number on every decimal", () => {
    fc.assert(fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (x) => number(String(x)) === x));
    fc.assert(fc.property(fc.integer({ min: -180_000_000, max: 180_000_000 }), (x) => number((x / 1e6).toFixed(6)) === x / 1e6));
  });

  it("reads a decimal comma where the file has one", () => {
    expect(number("-38,25", ",")).toBe(-38.25);
    expect(number("-38,25")).toBeNaN();
    expect(number("1.000,5", ",")).toBeNaN();
  });

  it.each(["", "-", ".", "1e", "0x10", "1 2", "NaN", "Infinity", "1.2.3", "12abc"])("takes %j for no number", (text) => {
    expect(number(text)).toBeNaN();
  });
});

describe("timeParser", () => {
  it.each([
    ["2026-03-02T08:00:00Z", "2026-03-02T08:00:00.000Z"],
    ["2026-03-02 08:00:00.1239+00", "2026-03-02T08:00:00.124Z"],
    ["2026-03-02T08:00Z", "2026-03-02T08:00:00.000Z"],
    ["2026-03-02T08:00:00,5-0330", "2026-03-02T11:30:00.500Z"],
    ["2026/03/02 08:00:00 UTC", "2026-03-02T08:00:00.000Z"],
    ["20260302T080000Z", "2026-03-02T08:00:00.000Z"],
    ["2024-02-29T23:59:60Z", "2024-03-01T00:00:00.000Z"],
    ["2026-03-02T08:00:00", null],
    ["2026-02-29T08:00:00Z", null],
    ["2026-13-01T08:00:00Z", null],
    ["2026-03-02T24:30:00Z", null],
    ["2026-03-02T08:60:00Z", null],
    ["2026-03-02T08:00:00.Z", null],
    ["2026-03-02T08:00:00+15:00", null],
    ["2026-03-02T08", null],
    ["0026-03-02T08:00:00Z", null],
  ])("reads %s as %s", (text, expected) => {
    expect(time(text, "iso")).toBe(expected);
  });

  it("reads epochs in seconds and milliseconds and refuses one taken for the other", () => {
    expect(time("1772438400.25", "epoch_s")).toBe("2026-03-02T08:00:00.250Z");
    expect(time("1772438400250", "epoch_ms")).toBe("2026-03-02T08:00:00.250Z");
    expect(time("1772438400250", "epoch_s")).toBeNull();
    expect(time("1772438400", "epoch_ms")).toBeNull();
  });

  // Clock changes of 2026: New York on 8 March and 1 November, Azores on 29 March and 25 October (IANA time zone data).
  it.each([
    ["America/New_York", "2026-01-15T12:00:00", "2026-01-15T17:00:00.000Z"],
    ["America/New_York", "2026-03-08T01:59:59", "2026-03-08T06:59:59.000Z"],
    ["America/New_York", "2026-03-08T02:30:00", null],
    ["America/New_York", "2026-03-08T03:00:00", "2026-03-08T07:00:00.000Z"],
    ["America/New_York", "2026-11-01T01:30:00", "2026-11-01T05:30:00.000Z"],
    ["America/New_York", "2026-11-01T02:00:00", "2026-11-01T07:00:00.000Z"],
    ["Atlantic/Azores", "2026-03-29T00:30:00", null],
    ["Atlantic/Azores", "2026-10-25T00:30:00", "2026-10-25T00:30:00.000Z"],
    ["Asia/Kathmandu", "2026-03-02T08:00:00", "2026-03-02T02:15:00.000Z"],
    ["UTC", "02.03.2026 08:00:07", "2026-03-02T08:00:07.000Z"],
    ["America/New_York", "2026-11-01T01:30:00-05:00", "2026-11-01T06:30:00.000Z"],
  ])("reads the wall clock of %s, %s, as %s", (zone, text, expected) => {
    expect(time(text, "local", zone)).toBe(expected);
  });

  it.each([
    ["local_mdy", "03/02/2026 08:00:00", "2026-03-02T13:00:00.000Z"],
    ["local_mdy", "3/2/2026 8:05 AM", "2026-03-02T13:05:00.000Z"],
    ["local_mdy", "03/02/2026 12:00:07 AM", "2026-03-02T05:00:07.000Z"],
    ["local_mdy", "03/02/2026 12:00:07pm", "2026-03-02T17:00:07.000Z"],
    ["local_mdy", "12/31/2025 11:59:59.250 PM", "2026-01-01T04:59:59.250Z"],
    ["local_mdy", "03/08/2026 02:30 AM", null],
    ["local_dmy", "02/03/2026 08:00", "2026-03-02T13:00:00.000Z"],
    ["local_dmy", "31/12/2025 23:59:59", "2026-01-01T04:59:59.000Z"],
    ["local_dmy", "12/31/2025 23:59:59", null],
    ["local_mdy", "31/12/2025 23:59:59", null],
    ["local_mdy", "02/29/2026 08:00:00", null],
    ["local_mdy", "03/02/2026 13:00 PM", null],
    ["local_mdy", "03/02/2026 0:30 AM", null],
    ["local_mdy", "03/02/2026 24:00", null],
    ["local_mdy", "03/02/2026 08:60", null],
    ["local_mdy", "03/02/2026 08:00:", null],
    ["local_mdy", "03/02/2026 08:00:00.", null],
    ["local_mdy", "03/02/2026 08:00 XM", null],
    ["local_mdy", "03/02/26 08:00", null],
    ["local_mdy", "03/02/2026", null],
    ["local", "30.02.2026 08:00:00", null],
  ] as const)("reads %s %s in New York as %s", (format, text, expected) => {
    expect(time(text, format, "America/New_York")).toBe(expected);
  });
});
