import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { FileMapping } from "@/domain/upload";
import { PlainRows } from "@/formats/pings/plain-rows";
import { PingJudge } from "@/formats/pings/ping-judge";
import { cut, PING_MAPPING, pingsOf } from "./streams";

const bytesOf = (text: string) => new TextEncoder().encode(text);
/** Long enough for the plain reader, which leaves the last 1,024 bytes to the careful one. */
const PADDING = "pad,2026-03-02T08:00:00Z,45.6,-38.3,1,1\n".repeat(40);
const EPOCH: FileMapping = { ...PING_MAPPING, timeFormat: "epoch_ms" };
const HEAD = "vehicle_id,timestamp,lat,lon,speed,heading\n";

describe("plain rows", () => {
  it("takes a row as it stands and says where the next one begins", () => {
    const judge = new PingJudge(EPOCH);
    const rows = new PlainRows(EPOCH, 6, judge);
    const row = "bus 7,1772438400000,45.600001,-38.3,36,90\n";
    const bytes = bytesOf(row + PADDING);
    expect(rows.read(bytes, 0)).toBe(row.length);
    expect([judge.tMs, judge.lat, judge.lon, judge.speedMs, judge.headingDeg]).toEqual([1772438400000, 45.600001, -38.3, 10, 90]);
    expect(new TextDecoder().decode(bytes.subarray(rows.nameStart, rows.nameEnd))).toBe("bus 7");
  });

  it.each([
    ["a quoted name", '"a",1772438400000,45.6,-38.3,36,90\n'],
    ["a space before a number", "a,1772438400000, 45.6,-38.3,36,90\n"],
    ["an exponent", "a,1772438400000,4.56e1,-38.3,36,90\n"],
    ["a word for no value", "a,1772438400000,45.6,-38.3,null,90\n"],
    ["no name", ",1772438400000,45.6,-38.3,36,90\n"],
    ["too few columns", "a,1772438400000,45.6,-38.3,36\n"],
    ["too many columns", "a,1772438400000,45.6,-38.3,36,90,\n"],
    ["no position", "a,1772438400000,,-38.3,36,90\n"],
    ["a position off the globe", "a,1772438400000,95.6,-38.3,36,90\n"],
    ["a time before 1990", "a,0,45.6,-38.3,36,90\n"],
    ["more digits than a number keeps exactly", "a,1772438400000,45.6000000000000001,-38.3,36,90\n"],
  ])("leaves %s to the careful reader", (_, row) => {
    expect(new PlainRows(EPOCH, 6, new PingJudge(EPOCH)).read(bytesOf(row + PADDING), 0)).toBe(-1);
  });

  it("is not for mappings whose columns the file lacks, or that stand for two fields", () => {
    expect(PlainRows.suits(PING_MAPPING, 6)).toBe(true);
    expect(PlainRows.suits(PING_MAPPING, 3)).toBe(false);
    expect(PlainRows.suits({ ...PING_MAPPING, columns: { ...PING_MAPPING.columns, heading: 4 } }, 6)).toBe(false);
    expect(PlainRows.suits({ ...PING_MAPPING, decimal: "," }, 6)).toBe(false);
  });
});

const name = fc.constantFrom("a", "b12", "vehicle-3", "", " c", "d ", '"q,1"', '"q""2"', 'e"f', "ü");
const time = fc.constantFrom("2026-03-02T08:00:00Z", "2026-03-02 08:00:00.5+01:00", "1772438400000", "1772438400", "x", "", " 1772438400000");
const number = fc.constantFrom("45.6", "-38.3", "0", "-0", "+7.25", ".5", "5.", ".", "-", "", "1e1", "null", " 12", "12 ", "361", "-181", "999", "123456789012345678", "0.1234567890123456", '"3"');
const row = fc.tuple(name, time, number, number, number, number, fc.constantFrom("", ",", ",x", "\r")).map(([v, t, a, o, s, h, end]) => `${[v, t, a, o, s, h].join(",")}${end}\n`);

describe("the plain and the careful reader", () => {
  it.each(["iso", "epoch_ms", "epoch_s"] as const)("agree on every row, times %s", async (timeFormat) => {
    const mapping: FileMapping = { ...PING_MAPPING, timeFormat };
    const agree = fc.asyncProperty(fc.array(row, { minLength: 1, maxLength: 60 }), async (rows) => {
      const bytes = bytesOf(HEAD + rows.join("") + PADDING);
      // Pieces of 64 bytes are too short for the plain reader.
      const careful = await pingsOf(cut(bytes, Array.from({ length: Math.ceil(bytes.length / 64) }, (_, i) => i * 64)), mapping);
      expect(await pingsOf(cut(bytes), mapping)).toEqual(careful);
    });
    await fc.assert(agree, { numRuns: 30 });
  });

  it("agree on semicolons, decimal commas and columns that nobody needs", async () => {
    const mapping: FileMapping = {
      ...EPOCH, delimiter: ";", decimal: ",", columns: { vehicle_id: 3, timestamp: 1, lat: 4, lon: 5, speed: 7 },
    };
    const rows = Array.from({ length: 60 }, (_, i) => `x${i};${1772438400000 + i};;v${i % 7};45,${i + 100};-38,3;kept as it is;${i},5\r\n`).join("");
    const bytes = bytesOf(`a;b;c;d;e;f;g;h\r\n${rows}`);
    const whole = await pingsOf(cut(bytes), mapping);
    expect(whole.counts.accepted).toBe(60);
    expect(whole.pings[59]).toMatchObject({ vehicle: "v3", lat: 45.159, speedMs: Math.fround(59.5 / 3.6) });
    expect(await pingsOf(cut(bytes, Array.from({ length: bytes.length >> 6 }, (_, i) => i * 64)), mapping)).toEqual(whole);
  });
});
