import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { detect } from "@/formats/detect/detect";
import { columnsFromHeader, speedUnitFromName } from "@/formats/detect/synonyms";
import { fixture } from "./streams";

const bytes = (text: string) => new TextEncoder().encode(text);

describe("detect", () => {
  it("reads a plain file of pings without a remark", () => {
    const found = detect(fixture("clean.csv"), "clean.csv", "pings");
    expect(found.mapping).toEqual({
      format: "csv",
      delimiter: ",",
      decimal: ".",
      hasHeader: true,
      columns: { vehicle_id: 0, timestamp: 1, lat: 2, lon: 3, speed: 4, heading: 5 },
      timeFormat: "iso",
      timeZone: "UTC",
      speedUnit: "kmh",
    });
    expect(found.remarks).toEqual([]);
    expect(found.preview[4]).toEqual(['c,"3"', "2026-03-02T08:00:12Z", "45.620000", "-38.320000", "18", "-90"]);
  });

  it("finds semicolons, decimal commas, other names, local times and miles", () => {
    const { mapping, header, remarks } = detect(fixture("semicolon.csv"), "semicolon.csv", "pings");
    expect(mapping).toMatchObject({ delimiter: ";", decimal: ",", timeFormat: "local", speedUnit: "mph" });
    expect(mapping.columns).toEqual({ vehicle_id: 0, timestamp: 1, lat: 2, lon: 3, speed: 4, heading: 5 });
    expect(header[0]).toBe("Device ID");
    expect(remarks).toEqual(["The times carry no zone: they are read in the zone that is chosen."]);
  });

  const dated = (...times: string[]) => detect(bytes(["vehicle_id,timestamp,lat,lon", ...times.map((time) => `v,${time},45.6,-38.3`)].join("\n")), "x.csv", "pings");
  const NO_ZONE = "The times carry no zone: they are read in the zone that is chosen.";

  it("tells from a day above 12 whether it stands before or after the month", () => {
    const monthFirst = dated("03/02/2026 8:00:00 AM", "03/13/2026 8:00:05 AM");
    expect(monthFirst.mapping.timeFormat).toBe("local_mdy");
    expect(monthFirst.remarks).toEqual([NO_ZONE]);
    const dayFirst = dated("02/03/2026 08:00:00", "13/03/2026 08:00:05");
    expect(dayFirst.mapping.timeFormat).toBe("local_dmy");
    expect(dayFirst.remarks).toEqual([NO_ZONE]);
    expect(dated("02.03.2026 08:00").mapping.timeFormat).toBe("local");
  });

  it("leaves it to the person where no date tells", () => {
    const { mapping, remarks } = dated("03/02/2026 08:00:00", "03/02/2026 08:00:05");
    expect(mapping.timeFormat).toBe("local_mdy");
    expect(remarks).toEqual([NO_ZONE, "The dates do not tell whether month or day comes first: month first is assumed. Choose day first if it is so."]);
  });

  it("finds tabs and epochs in milliseconds, in gzip too", () => {
    const found = detect(gzipSync(fixture("tab.tsv")), "tab.tsv.gz", "pings");
    expect(found.gzip).toBe(true);
    expect(found.mapping).toMatchObject({ delimiter: "\t", timeFormat: "epoch_ms" });
  });

  it("looks at the beginning of a packed file that hardly shrinks", () => {
    // 32-bit congruential numbers as names: gzip has little to gain, so that 64 KiB of it end within the list.
    let seed = 1;
    const next = () => (seed = (Math.imul(seed, 1664525) + 1013904223) >>> 0).toString(36);
    const name = () => Array.from({ length: 150 }, next).join("");
    const features = Array.from({ length: 120 }, () => ({ type: "Feature", geometry: { type: "Point", coordinates: [-38.3, 45.6] }, properties: { junction_id: name(), name: "x" } }));
    const packed = gzipSync(JSON.stringify({ type: "FeatureCollection", features }));
    expect(packed.length).toBeGreaterThan(65_536);
    expect(detect(packed, "j.geojson.gz", "junctions").mapping.columns).toEqual({ junction_id: "junction_id", name: "name" });
  });

  it("finds properties of GeoJSON", () => {
    const found = detect(fixture("pings.geojson"), "pings.geojson", "pings");
    expect(found.mapping).toMatchObject({ format: "geojson", speedUnit: "ms", timeFormat: "iso" });
    expect(found.mapping.columns).toEqual({ vehicle_id: "vehicle_id", timestamp: "timestamp", speed: "speed_ms", heading: "heading" });
    expect(detect(fixture("junctions.geojson"), "j.json", "junctions").mapping.columns).toEqual({ junction_id: "junction_id", name: "name", cycle_s: "cycle_s" });
  });

  it("takes the described order where there is no header, and says so", () => {
    const { mapping, remarks } = detect(bytes("v1,1772438400,45.6,-38.3\nv1,1772438405,45.6,-38.3\n"), "x.csv", "pings");
    expect(mapping).toMatchObject({ hasHeader: false, timeFormat: "epoch_s", columns: { vehicle_id: 0, timestamp: 1, lat: 2, lon: 3 } });
    expect(remarks).toEqual(["The file has no header row: check which column is which."]);
  });

  // A vehicle that drives north at 15 m/s: 0.001 degrees of latitude are 111.2 m on the mean sphere, 7.413 s.
  it.each([
    [15, "ms"],
    [54, "kmh"],
    [33.55, "mph"],
  ])("tells the unit of a reported speed of %d at 15 m/s from the way that was driven", (speed, unit) => {
    const rows = Array.from({ length: 30 }, (_, i) => `v,${(1772438400 + i * 7.413).toFixed(3)},${(45.6 + i * 0.001).toFixed(4)},-38.3,${speed}`);
    const { mapping, remarks } = detect(bytes(["vehicle_id,timestamp,lat,lon,speed", ...rows].join("\n")), "x.csv", "pings");
    expect(mapping.speedUnit).toBe(unit);
    expect(remarks[0]).toContain("the way the vehicles went suggests");
  });

  it("takes what a person has settled as given", () => {
    const found = detect(fixture("clean.csv"), "clean.csv", "pings", { delimiter: ";", hasHeader: false });
    expect(found.header).toEqual(["column 1"]);
    expect(found.mapping).toMatchObject({ delimiter: ";", hasHeader: false, columns: { vehicle_id: 0 } });
    expect(found.preview[0]).toEqual(["vehicle_id,timestamp,lat,lon,speed_kmh,heading"]);
  });

  it("names the columns that it did not find", () => {
    const { remarks } = detect(bytes("vehicle_id,when,lat\nv,1,2\n"), "x.csv", "pings");
    expect(remarks).toContain("No column was recognised for timestamp, lon: choose it.");
  });

  it.each([
    ["an empty file", new Uint8Array(0), "The file x is empty."],
    ["a spreadsheet", bytes("PK\u0003\u0004rest"), "This is a zip archive or a spreadsheet."],
    ["random bytes", Uint8Array.from({ length: 5000 }, (_, i) => (i * 7919 + (i >> 3) * 31) & 255), "This is not a text file."],
    ["damaged gzip", Uint8Array.from([0x1f, 0x8b, 8, 0, 0, 0, 0, 0, 0, 3, 255, 255, 255, 255, 255, 255]), "The gzip data are damaged"],
  ])("refuses %s with a sentence", (_, content, sentence) => {
    expect(() => detect(content, "x", "pings")).toThrow(sentence);
  });
});

describe("column names", () => {
  it("prefers the exact name and gives a column to one field only", () => {
    expect(columnsFromHeader(["id", "junction_id", "name", "Y", "X"], "junctions")).toEqual({ junction_id: 1, name: 2, lat: 3, lon: 4 });
    expect(columnsFromHeader(["vehicleId", "timeUtc", "latitude", "lng"], "pings")).toEqual({ vehicle_id: 0, timestamp: 1, lat: 2, lon: 3 });
  });

  it("reads the unit of speed from the name", () => {
    expect(["speed_kmh", "Speed (km/h)", "speed_mps", "Speed [m/s]", "spd_kn", "speed"].map(speedUnitFromName)).toEqual(["kmh", "kmh", "ms", "ms", "kn", null]);
  });
});
