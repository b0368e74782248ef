import { createHash } from "node:crypto";
import { mkdtempSync, readFileSync, readdirSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gunzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { buildBaseMap, featureCollection } from "@seed/basemap/base-map";
import { generateCity, type GeneratedCity } from "@seed/index";
import { buildCity } from "@seed/network/build-city";
import { FLEETS } from "@seed/probes/fleets";
import { createRandomStream } from "@seed/random";

const folders = [0, 1].map(() => mkdtempSync(join(tmpdir(), "varnmouth-")));
let made: GeneratedCity[];
let rows: string[][];
const progress: number[] = [];

beforeAll(async () => {
  made = [
    await generateCity({ outDir: folders[0], scale: "small", onProgress: (share) => progress.push(share) }),
    await generateCity({ outDir: folders[1], scale: "small" }),
  ];
  rows = made[0].pingFiles.flatMap((file) => gunzipSync(readFileSync(file)).toString("utf8").trimEnd().split("\n").slice(1).map((row) => row.split(",")));
}, 60_000);

afterAll(() => folders.forEach((folder) => rmSync(folder, { recursive: true })));

const sha256 = (file: string) => createHash("sha256").update(readFileSync(file)).digest("hex");

describe("the files of the small city", () => {
  it("are the same bytes every time", () => {
    const [first, second] = made.map((city) => [city.junctionsFile, ...city.pingFiles].map(sha256));
    expect(first).toEqual(second);
  });

  it("report progress that rises from nothing to all", () => {
    expect(progress[0]).toBe(0);
    expect(progress[progress.length - 1]).toBe(1);
    expect(progress).toEqual([...progress].sort((a, b) => a - b));
  });

  it("hold pings as the formats page describes them: identifier, UTC time, position, speed, heading or nothing", () => {
    const header = gunzipSync(readFileSync(made[0].pingFiles[0])).toString("utf8").split("\n", 1)[0];
    expect(header).toBe("vehicle_id,timestamp,lat,lon,speed_kmh,heading");
    const form = [/^[a-z]\d\d-\d+$/, /^2026-03-0[34]T\d\d:\d\d:\d\dZ$/, /^45\.\d{6}$/, /^-38\.\d{6}$/, /^\d{1,3}\.\d$/, /^(\d|[1-9]\d|[12]\d\d|3[0-5]\d)?$/];
    const wrong = rows.filter((row) => row.length !== form.length || !row.every((cell, i) => form[i].test(cell)));
    expect(wrong).toEqual([]);
    expect(rows.length).toBe(made[0].pings);
    expect(rows.length).toBeGreaterThan(50_000);
  });

  it("keep to the delivered hours: 07:15 to 08:15 and 16:15 to 17:45 in the Azores, which are an hour behind UTC in early March", () => {
    const minutes = rows.map((row) => Number(row[1].slice(11, 13)) * 60 + Number(row[1].slice(14, 16)) + Number(row[1].slice(17, 19)) / 60 - 60);
    const outside = minutes.filter((minute) => !((minute >= 435 && minute <= 495) || (minute >= 975 && minute <= 1065)));
    expect(outside).toEqual([]);
  });

  it("give each vehicle its fleet's interval, rising times and no impossible jump", () => {
    const last = new Map<string, { t: number; lat: number; lon: number }>();
    let wrongInterval = 0;
    let jumps = 0;
    for (const [vehicle, time, lat, lon] of rows) {
      const t = Date.parse(time) / 1000;
      const now = { t, lat: Number(lat) * 111_150, lon: Number(lon) * 78_000 };
      const before = last.get(vehicle);
      last.set(vehicle, now);
      const interval = FLEETS.find((fleet) => fleet.prefix === vehicle[0])?.intervalS ?? NaN;
      if (!before || t - before.t > 3600) continue;
      if (t - before.t !== interval) wrongInterval++;
      // 70 km/h, plus what two position errors can add.
      if (Math.hypot(now.lat - before.lat, now.lon - before.lon) > 19.5 * interval + 30) jumps++;
    }
    expect({ wrongInterval, jumps }).toEqual({ wrongInterval: 0, jumps: 0 });
  });

  it("hold the junctions with the columns of the format", () => {
    const lines = readFileSync(made[0].junctionsFile, "utf8").trimEnd().split("\n");
    expect(lines[0]).toBe("junction_id,name,lat,lon,corridor,corridor_order,district,cycle_s,last_retimed,notes");
    expect(lines.length - 1).toBe(buildCity("small").nodes.filter((node) => !node.isGate).length);
    for (const line of lines.slice(1)) {
      const [id, name, lat, lon, , , district, cycle, retimed] = line.split(",");
      expect(line.split(",").length).toBe(10);
      expect(id).toMatch(/^VM\d{3}$/);
      expect(name).not.toBe("");
      expect(district).not.toBe("");
      expect(Math.abs(Number(lat) - 45.6)).toBeLessThan(0.05);
      expect(Math.abs(Number(lon) + 38.3)).toBeLessThan(0.07);
      expect(Number(cycle)).toBeGreaterThanOrEqual(60);
      expect(retimed).toMatch(/^20\d\d-\d\d-\d\d$/);
    }
  });
});

describe("the base map", () => {
  it("in public/map is the one the plan yields, below 600 kB in all", () => {
    const folder = join(import.meta.dirname, "..", "..", "public", "map");
    const map = buildBaseMap(buildCity("demo"));
    for (const [name, features] of Object.entries(map)) {
      expect(readFileSync(join(folder, `${name}.geojson`), "utf8") === featureCollection(features), name).toBe(true);
    }
    const bytes = readdirSync(folder).filter((name) => name.endsWith(".geojson")).reduce((sum, name) => sum + statSync(join(folder, name)).size, 0);
    expect(bytes).toBeLessThan(600_000);
  });
});

describe("the random stream", () => {
  it("depends on its seeds alone and is uniform and normal enough", () => {
    const [a, b, c] = [createRandomStream(1, 2), createRandomStream(1, 2), createRandomStream(1, 3)];
    const draw = (stream: typeof a) => Array.from({ length: 5 }, () => stream.next());
    const first = draw(a);
    expect(draw(b)).toEqual(first);
    expect(draw(c)).not.toEqual(first);
    let [sum, squares, mean] = [0, 0, 0];
    for (let i = 0; i < 20_000; i++) {
      mean += c.next() / 20_000;
      const z = c.normal();
      sum += z / 20_000;
      squares += (z * z) / 20_000;
    }
    // Three standard errors: 0.0061 for a uniform mean, 0.021 for a normal mean, 0.03 for its variance.
    expect(Math.abs(mean - 0.5)).toBeLessThan(0.0061);
    expect(Math.abs(sum)).toBeLessThan(0.021);
    expect(Math.abs(squares - 1)).toBeLessThan(0.03);
  });
});
