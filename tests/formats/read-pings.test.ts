import { gzipSync } from "node:zlib";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { cut, fixture, PING_MAPPING, pingsOf } from "./streams";

const text = (lines: string[]) => new TextEncoder().encode(lines.join("\n"));

describe("readPings", () => {
  it("reads columns, zones, units, missing values and quoted names", async () => {
    const { pings, counts } = await pingsOf(cut(fixture("clean.csv")));
    expect(counts).toEqual({ rowsRead: 5, accepted: 5, rejected: {}, samples: [] });
    expect(pings).toEqual([
      { vehicle: "a1", time: "2026-03-02T08:00:00.000Z", lat: 45.6, lon: -38.3, speedMs: 10, headingDeg: 90 },
      { vehicle: "a1", time: "2026-03-02T08:00:05.000Z", lat: 45.60001, lon: -38.2994, speedMs: Math.fround(35.5 / 3.6), headingDeg: 91 },
      { vehicle: "b2", time: "2026-03-02T07:00:06.000Z", lat: 45.61, lon: -38.31, speedMs: NaN, headingDeg: NaN },
      { vehicle: "b2", time: "2026-03-02T09:00:11.250Z", lat: 45.6104, lon: -38.31, speedMs: 0, headingDeg: 0 },
      { vehicle: 'c,"3"', time: "2026-03-02T08:00:12.000Z", lat: 45.62, lon: -38.32, speedMs: 5, headingDeg: 270 },
    ]);
  });

  it("refuses bad rows with line and reason, and is left with exactly the clean file", async () => {
    const dirty = await pingsOf(cut(fixture("dirty.csv")));
    const clean = await pingsOf(cut(fixture("clean.csv")));
    expect(dirty.pings).toEqual(clean.pings);
    expect(dirty.vehicles).toBe(clean.vehicles);
    expect(dirty.rejects.map(({ line, reason }) => [line, reason])).toEqual([
      [3, "vehicle"],
      [4, "time"],
      [6, "time"],
      [7, "position"],
      [8, "position"],
      [9, "columns"],
      [12, "columns"],
      [13, "speed"],
      [14, "speed"],
      [15, "heading"],
      [17, "time"],
      [18, "position"],
      [20, "columns"],
      [21, "columns"],
    ]);
    expect(dirty.rejects[0].text).toBe(",2026-03-02T08:00:01Z,45.600000,-38.300000,36.0,90");
    expect(dirty.counts.rowsRead).toBe(5 + 14);
    expect(dirty.counts.rejected).toEqual({ vehicle: 1, time: 3, position: 3, columns: 4, speed: 2, heading: 1 });
  });

  it("gives the same result wherever the input is cut", async () => {
    for (const name of ["dirty.csv", "semicolon.csv"]) {
      const bytes = fixture(name);
      const whole = await pingsOf(cut(bytes));
      const places = fc.array(fc.integer({ min: 0, max: bytes.length }), { maxLength: 30 });
      const sameWhereverCut = fc.asyncProperty(places, async (at) => {
        expect(await pingsOf(cut(bytes, at))).toEqual(whole);
      });
      await fc.assert(sameWhereverCut, { numRuns: 60 });
      const everywhere = Array.from(bytes, (_, i) => i);
      expect(await pingsOf(cut(bytes, everywhere))).toEqual(whole);
    }
  });

  it("accounts for every row of any text", async () => {
    const cell = fc.oneof(fc.constantFrom("v1", "2026-03-02T08:00:00Z", "45.6", "-38.3", '"', '""', '"x"', "", " ", "\r", "é"), fc.string({ maxLength: 5 }));
    const row = fc.array(cell, { maxLength: 8 }).map((cells) => cells.join(","));
    await fc.assert(
      fc.asyncProperty(fc.array(row, { maxLength: 12 }), fc.nat(200), async (rows, at) => {
        const bytes = text(["vehicle_id,timestamp,lat,lon,speed_kmh,heading", ...rows]);
        const whole = await pingsOf(cut(bytes));
        expect(whole.counts.accepted + whole.rejects.length).toBe(whole.counts.rowsRead);
        expect(whole.pings.length).toBe(whole.counts.accepted);
        expect(await pingsOf(cut(bytes, [Math.min(at, bytes.length)]))).toEqual(whole);
      }),
      { numRuns: 300 },
    );
  });

  it("hands out batches of the size asked for, the last one shorter", async () => {
    const rows = Array.from({ length: 10 }, (_, i) => `v${i % 3},2026-03-02T08:00:0${i}Z,45.6,-38.3,0,0`);
    const { batchSizes, vehicles } = await pingsOf(cut(text(["h1,h2,h3,h4,h5,h6", ...rows])));
    expect(batchSizes).toEqual([4, 4, 2]);
    expect(vehicles).toBe(3);
  });

  it("lets a quoted field span lines where the row then has its columns", async () => {
    const bytes = text(["vehicle_id,timestamp,lat,lon,note", 'v,2026-03-02T08:00:00Z,45.6,-38.3,"two', 'lines"', "v,2026-03-02T08:00:05Z,45.6,-38.3,x", ",,,,"]);
    const { pings, rejects } = await pingsOf(cut(bytes), { ...PING_MAPPING, columns: { vehicle_id: 0, timestamp: 1, lat: 2, lon: 3 } });
    expect(pings.map((p) => p.time)).toEqual(["2026-03-02T08:00:00.000Z", "2026-03-02T08:00:05.000Z"]);
    expect(rejects).toEqual([{ line: 5, reason: "vehicle", text: ",,,," }]);
  });

  it("reads decimal commas, local times and miles per hour", async () => {
    const mapping = { ...PING_MAPPING, delimiter: ";", decimal: ",", timeFormat: "local", timeZone: "Atlantic/Azores", speedUnit: "mph" } as const;
    const { pings } = await pingsOf(cut(fixture("semicolon.csv")), mapping);
    expect(pings[1]).toEqual({ vehicle: "d1", time: "2026-03-02T09:00:05.000Z", lat: 45.6001, lon: -38.3, speedMs: Math.fround(11 * 0.44704), headingDeg: 12.5 });
  });

  it("reads gzip, of one or several members", async () => {
    const bytes = fixture("clean.csv");
    const packed = Buffer.concat([gzipSync(bytes.subarray(0, 100)), gzipSync(bytes.subarray(100))]);
    expect(await pingsOf(cut(packed, [1, 50]))).toEqual(await pingsOf(cut(bytes)));
  });

  it("reads points of GeoJSON, wherever the input is cut", async () => {
    const mapping = { ...PING_MAPPING, format: "geojson", speedUnit: "ms", columns: { vehicle_id: "vehicle_id", timestamp: "timestamp", speed: "speed_ms", heading: "heading" } } as const;
    const bytes = fixture("pings.geojson");
    const whole = await pingsOf(cut(bytes), mapping);
    expect(whole.pings).toEqual([
      { vehicle: "a{1", time: "2026-03-02T08:00:00.000Z", lat: 45.6, lon: -38.3, speedMs: 10, headingDeg: 90 },
      { vehicle: "7", time: "2026-03-02T08:00:05.000Z", lat: 45.601, lon: -38.299, speedMs: NaN, headingDeg: NaN },
    ]);
    expect(whole.rejects.map(({ line, reason }) => [line, reason])).toEqual([[6, "position"]]);
    expect(await pingsOf(cut(bytes, Array.from(bytes, (_, i) => i)), mapping)).toEqual(whole);
  });

  it.each([
    ["a cut gzip file", gzipSync(fixture("dirty.csv")).subarray(0, 200), "The gzip data end too early: the file is cut off. Send it again."],
    ["damaged gzip", damaged(), "The gzip data are damaged and cannot be unpacked. Send the file again."],
    ["a gzip bomb", gzipSync(new Uint8Array(100 * 2 ** 20)), "Line 1 is longer than 1 MiB. This does not look like a CSV file."],
    ["a bomb of short lines", gzipSync(new Uint8Array(100 * 2 ** 20).fill(10)), "The gzip data unpack to far more than a data file would. The file was refused."],
    ["an endless line", new Uint8Array(3 * 2 ** 20).fill(65), "Line 1 is longer than 1 MiB. This does not look like a CSV file."],
  ])("says in a sentence what is wrong with %s", async (_, bytes, sentence) => {
    await expect(pingsOf(cut(bytes))).rejects.toThrow(sentence);
  });

  it("says which column is missing in the mapping", async () => {
    const mapping = { ...PING_MAPPING, columns: { vehicle_id: 0, lat: 2 } };
    await expect(pingsOf(cut(fixture("clean.csv")), mapping)).rejects.toThrow("The file has no column for timestamp, lon.");
  });

  it("says where GeoJSON is cut off or is none", async () => {
    const mapping = { ...PING_MAPPING, format: "geojson", columns: { vehicle_id: "a", timestamp: "b" } } as const;
    await expect(pingsOf(cut(fixture("pings.geojson").subarray(0, 500)), mapping)).rejects.toThrow("ends too early, on line 6");
    await expect(pingsOf(cut(text(["hello"])), mapping)).rejects.toThrow("This is not GeoJSON");
    await expect(pingsOf(cut(text(["{}"])), mapping)).rejects.toThrow("holds no list of features");
  });
});

function damaged(): Uint8Array {
  const bytes = gzipSync(fixture("dirty.csv"));
  bytes.fill(0xff, 20, 60);
  return bytes;
}
