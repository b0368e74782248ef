import { describe, expect, it } from "vitest";
import { fieldsOf, type FileMapping } from "@/domain/upload";
import { fieldList, fieldOfColumn, missingFields, remembered, withColumnAs } from "@/ui/uploads/mapping-state";

const HEADER = ["id", "when", "y", "x"];
const CSV: FileMapping = {
  format: "csv",
  delimiter: ",",
  decimal: ".",
  hasHeader: true,
  columns: { vehicle_id: 0, timestamp: 1, lat: 2, lon: 3 },
  timeFormat: "iso",
  timeZone: "UTC",
  speedUnit: "kmh",
};

describe("a mapping in the form", () => {
  it("moves a field from one column to another and frees what stood there", () => {
    const moved = withColumnAs(CSV, HEADER, 3, "lat");
    expect(moved.columns).toEqual({ vehicle_id: 0, timestamp: 1, lat: 3 });
    expect(missingFields(moved, "pings")).toEqual(["lon"]);
    expect(fieldOfColumn(moved, HEADER, 2)).toBe("");
    expect(fieldOfColumn(moved, HEADER, 3)).toBe("lat");
  });

  it("leaves a column unused", () => {
    expect(withColumnAs(CSV, HEADER, 0, "").columns).toEqual({ timestamp: 1, lat: 2, lon: 3 });
  });

  it("names properties in GeoJSON and asks for no position there", () => {
    const geojson: FileMapping = { ...CSV, format: "geojson", columns: {} };
    const named = withColumnAs(geojson, HEADER, 0, "vehicle_id");
    expect(named.columns).toEqual({ vehicle_id: "id" });
    expect(missingFields(named, "pings")).toEqual(["timestamp"]);
    expect(fieldsOf("pings", "geojson")).toEqual(["vehicle_id", "timestamp", "speed", "heading", "trip_id"]);
  });

  it("takes a supplier's mapping only if it fits the file", () => {
    const before: FileMapping = { ...CSV, speedUnit: "mph", columns: { vehicle_id: 3, timestamp: 2, lat: 1, lon: 0 } };
    expect(remembered(before, CSV, HEADER)).toBe(before);
    expect(remembered(before, CSV, HEADER.slice(0, 3))).toBeNull();
    expect(remembered({ ...before, delimiter: ";" }, CSV, HEADER)).toBeNull();
    expect(remembered({ ...before, format: "geojson" }, CSV, HEADER)).toBeNull();
    expect(remembered(null, CSV, HEADER)).toBeNull();
  });

  it("reads a supplier's next file by the names of its columns", () => {
    const before: FileMapping = { ...CSV, header: ["id", "when", "y", "x", "angle"], columns: { vehicle_id: 0, timestamp: 1, lat: 2, lon: 3 } };
    const found: FileMapping = { ...CSV, speedUnit: "mph", columns: { lon: 0, lat: 1, vehicle_id: 2, timestamp: 3, speed: 4, heading: 5 } };
    const next = remembered(before, found, ["x", "y", "id", "when", "speed_mph", "angle"]);
    // Places by name; the speed is new, and its unit with it; the angle was there before and went unused.
    expect(next?.columns).toEqual({ vehicle_id: 2, timestamp: 3, lat: 1, lon: 0, speed: 4 });
    expect(next?.speedUnit).toBe("mph");
    expect(remembered(before, found, ["x", "id", "when", "speed_mph"])).toBeNull();
    const geojson: FileMapping = { ...CSV, format: "geojson", header: ["car", "at"], columns: { vehicle_id: "car", timestamp: "at" } };
    const features: FileMapping = { ...geojson, columns: { timestamp: "at", heading: "course" } };
    expect(remembered(geojson, features, ["at", "car", "course"])?.columns).toEqual({ vehicle_id: "car", timestamp: "at", heading: "course" });
  });

  it("lists fields as a person would", () => {
    expect(fieldList(["lat"])).toBe("latitude");
    expect(fieldList(["timestamp", "lat", "lon"])).toBe("time, latitude and longitude");
  });
});
