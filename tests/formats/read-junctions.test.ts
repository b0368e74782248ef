import { describe, expect, it } from "vitest";
import { detect } from "@/formats/detect/detect";
import { readJunctions } from "@/formats/junctions/read-junctions";
import { cut, fixture } from "./streams";

async function read(name: string, places: number[] = []) {
  const bytes = fixture(name);
  return readJunctions(cut(bytes, places), detect(bytes, name, "junctions").mapping);
}

describe("readJunctions", () => {
  it("reads all fields, keeps the first of two with one identifier, counts bad rows", async () => {
    const { junctions, rowsRead, accepted, rejectedRows, remarks } = await read("junctions.csv");
    expect(junctions[0]).toEqual({
      id: "J1",
      name: "Harbour Road / Mill Lane",
      lat: 45.6,
      lon: -38.3,
      corridor: "Harbour Road",
      corridorOrder: 1,
      district: "Old Town",
      cycleS: 90,
      lastRetimed: "2019-05-14",
      notes: 'first line\nsecond "line"',
    });
    expect(junctions.map((j) => j.id)).toEqual(["J1", "J2", "J4"]);
    expect(rejectedRows.map(({ line, reason }) => [line, reason])).toEqual([
      [5, "duplicate"],
      [6, "name"],
      [7, "position"],
    ]);
    expect([rowsRead, accepted]).toEqual([6, 3]);
    expect(remarks).toEqual([
      'Line 8: cycle_s "ninety" cannot be read and was left out.',
      'Line 8: last_retimed "soon" cannot be read and was left out.',
    ]);
  });

  it("reads GeoJSON points", async () => {
    const { junctions, rejectedRows } = await read("junctions.geojson");
    expect(junctions).toMatchObject([{ id: "12", name: "Market Cross", lat: 45.6, lon: -38.3, cycleS: 90, corridor: null }]);
    expect(rejectedRows.map((row) => row.reason)).toEqual(["position"]);
  });

  it("gives the same result cut after every byte", async () => {
    for (const name of ["junctions.csv", "junctions.geojson"]) {
      const everywhere = Array.from(fixture(name), (_, i) => i);
      expect(await read(name, everywhere)).toEqual(await read(name));
    }
  });
});
