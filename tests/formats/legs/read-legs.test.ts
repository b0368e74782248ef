import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { detect } from "@/formats/detect/detect";
import { readLegs } from "@/formats/legs/read-legs";
import { cut } from "../streams";

const JUNCTIONS = new Map([
  ["J1", { lat: 45.6, lon: -38.3 }],
  ["7", { lat: 45.61, lon: -38.3 }],
]);
/** From 234 m west of J1 to 20 m west of it. */
const FROM_THE_WEST = [
  [-38.303, 45.6],
  [-38.30026, 45.6],
];

const feature = (properties: object, coordinates: unknown, type = "LineString") => JSON.stringify({ type: "Feature", properties, geometry: { type, coordinates } });
const collection = (...features: string[]) => new TextEncoder().encode(`{"type":"FeatureCollection","features":[\n${features.join(",\n")}\n]}\n`);

async function read(bytes: Uint8Array, places: number[] = []) {
  return readLegs(cut(bytes, places), detect(bytes, "legs.geojson", "legs").mapping, JUNCTIONS);
}

describe("readLegs", () => {
  it("reads lines with all their properties, plain, packed and cut anywhere", async () => {
    const bytes = collection(
      feature({ junction_id: "J1", name: " Mill Lane inbound ", speed_limit_kmh: 50, storage_m: "120,5", lanes: 2 }, FROM_THE_WEST),
      feature({ junction_id: 7, name: null }, [[[-38.3, 45.607], [-38.3, 45.6098]]], "MultiLineString"),
    );
    const whole = await read(bytes);
    expect(whole).toMatchObject({ rowsRead: 2, accepted: 2, rejected: {}, remarks: [] });
    expect(whole.legs[0]).toEqual({
      junctionId: "J1",
      name: "Mill Lane inbound",
      lat: Float64Array.of(45.6, 45.6),
      lon: Float64Array.of(-38.303, -38.30026),
      speedLimitKmh: 50,
      storageM: 120.5,
      lanes: 2,
    });
    expect(whole.legs[1]).toMatchObject({ junctionId: "7", name: null, speedLimitKmh: null, storageM: null, lanes: null });
    expect(await read(bytes, [1, 60, 61, 200])).toEqual(whole);
    expect(await read(gzipSync(bytes))).toEqual(whole);
  });

  it("rejects each bad feature with its line and reason, and keeps the others", async () => {
    const outward = [...FROM_THE_WEST].reverse();
    const away = [[-38.31, 45.6], [-38.3025, 45.6]];
    const bytes = collection(
      feature({ junction_id: "J1" }, FROM_THE_WEST),
      feature({ junction_id: "J9" }, FROM_THE_WEST),
      feature({ junction_id: "" }, FROM_THE_WEST),
      feature({ junction_id: "J1" }, [-38.3, 45.6], "Point"),
      feature({ junction_id: "J1" }, [[-38.3, 45.6]]),
      feature({ junction_id: "J1" }, [[-38.303, 145.6], [-38.30026, 45.6]]),
      feature({ junction_id: "J1" }, outward),
      feature({ junction_id: "J1" }, away),
      feature({ junction_id: "J1" }, FROM_THE_WEST),
      // 23 m long.
      feature({ junction_id: "J1" }, [[-38.30056, 45.6], [-38.30026, 45.6]]),
    );
    const { legs, rowsRead, accepted, rejectedRows } = await read(bytes);
    expect(legs).toHaveLength(1);
    expect(rejectedRows.map(({ line, reason }) => [line, reason])).toEqual([
      [3, "junction"],
      [4, "name"],
      [5, "line"],
      [6, "line"],
      [7, "line"],
      [8, "far"],
      [9, "far"],
      [10, "duplicate"],
      [11, "line"],
    ]);
    expect(accepted + rejectedRows.length).toBe(rowsRead);
  });

  it("leaves numbers out that make no sense, and says so", async () => {
    const { legs, remarks } = await read(collection(feature({ junction_id: "J1", speed_limit_kmh: 500, storage_m: "long", lanes: 1.5 }, FROM_THE_WEST)));
    expect(legs[0]).toMatchObject({ speedLimitKmh: null, storageM: null, lanes: null });
    expect(remarks).toHaveLength(3);
    expect(remarks[0]).toBe('Line 2: speed_limit_kmh "500" is no number from 5 to 150 and was left out.');
  });

  it("refuses a file above 50 MB, one that is no GeoJSON, and one whose junctions are not named", async () => {
    const filler = `${feature({ junction_id: "J9", note: "x".repeat(900_000) }, FROM_THE_WEST)},\n`;
    async function* large() {
      yield new TextEncoder().encode('{"type":"FeatureCollection","features":[\n');
      for (let i = 0; i < 60; i++) yield new TextEncoder().encode(filler);
    }
    const { mapping } = detect(collection(feature({ junction_id: "J1" }, FROM_THE_WEST)), "legs.geojson", "legs");
    await expect(readLegs(large(), mapping, JUNCTIONS)).rejects.toThrow("larger than 50 MB");
    expect(() => detect(new TextEncoder().encode("junction_id,name\nJ1,x\n"), "legs.csv", "legs")).toThrow("legs.csv is no GeoJSON");
    const unnamed = detect(collection(feature({ street: "x" }, FROM_THE_WEST)), "legs.geojson", "legs");
    expect(unnamed.remarks).toEqual(["No column was recognised for junction_id: choose it."]);
  });
});
