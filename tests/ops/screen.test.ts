import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { drives, JUNCTIONS_CSV, PING_HEADER, pingRows } from "./crossroads";

const ROOT = join(import.meta.dirname, "../..");
const HEADER =
  "junction_id,approach_bearing_deg,turn,interval_start,vehicles,mean_delay_s,p95_delay_s,stop_share,stops_per_vehicle,queue_reach_m,spillback_share";
const rows = pingRows(drives(120, 20));

let folder = "";
const file = (name: string) => join(folder, name);
const put = (name: string, content: string | Uint8Array) => {
  writeFileSync(file(name), content);
  return file(name);
};

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "screen-"));
  put("junctions.csv", JUNCTIONS_CSV);
  put("pings.csv", [PING_HEADER, ...rows].join("\n"));
});

afterAll(() => rmSync(folder, { recursive: true }));

function screen(...args: string[]) {
  const run = spawnSync(process.execPath, ["--import", "tsx", "src/ops/screen.ts", ...args], { cwd: ROOT, encoding: "utf8" });
  return { code: run.status, stderr: run.stderr };
}

function screenFiles(pings: string[], junctions = file("junctions.csv"), ...more: string[]) {
  const out = file("out.csv");
  rmSync(out, { force: true });
  const run = screen(...pings.flatMap((path) => ["--pings", path]), "--junctions", junctions, "--out", out, ...more);
  return { ...run, table: run.code === 0 ? readFileSync(out, "utf8") : "" };
}

describe("the screen command", () => {
  it("scores a crossroads on which every other vehicle waits 20 s", () => {
    const { code, table, stderr } = screenFiles([file("pings.csv")]);
    expect(stderr).toContain(`${rows.length} rows read, ${rows.length} accepted, 0 rejected`);
    expect(code).toBe(0);
    const [header, ...lines] = table.trimEnd().split("\n");
    expect(header).toBe(HEADER);
    const totals = lines.map((line) => line.split(",")).filter((cells) => cells[3] === "all");
    expect(totals.map((cells) => [cells[0], cells[2], cells[4]])).toEqual(Array(4).fill(["X1", "through", "30"]));
    for (const [, , , , , meanDelayS, p95DelayS, stopShare, stopsPerVehicle] of totals) {
      expect(Number(meanDelayS)).toBeCloseTo(10, 0);
      expect(Number(p95DelayS)).toBeCloseTo(20, 0);
      expect([stopShare, stopsPerVehicle]).toEqual(["0.5", "0.5"]);
    }
    const bearings = totals.map((cells) => Math.round(Number(cells[1]) / 10) * 10).sort((a, b) => a - b);
    expect(bearings).toEqual([0, 90, 180, 270]);
    const quarters = lines.map((line) => line.split(",")).filter((cells) => cells[3] !== "all");
    expect(quarters.every((cells) => /^2026-03-02T08:(00|15|30|45):00Z$/.test(cells[3]))).toBe(true);
    expect(quarters.reduce((sum, cells) => sum + Number(cells[4]), 0)).toBe(120);
  });

  it("gives the same table for the file in two parts, in any order, packed, and one of them twice", () => {
    const whole = screenFiles([file("pings.csv")]).table;
    const half = rows.length / 2;
    const first = put("first.csv.gz", gzipSync([PING_HEADER, ...rows.slice(0, half)].join("\n")));
    const second = put("second.csv", [PING_HEADER, ...rows.slice(half)].join("\r\n"));
    expect(screenFiles([second, first, second]).table).toBe(whole);
  });

  it("leaves bad rows out, reports them with their lines, and gives the table of the clean file", () => {
    const dirty = put("dirty.csv", [PING_HEADER, "v0,never,45.6,-38.3,1,1", ...rows, "v0,2026-03-02T08:00:00Z,95,-38.3,1,1", "v0,2026"].join("\n"));
    const { code, stderr, table } = screenFiles([dirty]);
    expect(code).toBe(0);
    expect(stderr).toContain(`${rows.length + 3} rows read, ${rows.length} accepted, 3 rejected`);
    expect(stderr).toContain('line 2, time: "v0,never,45.6,-38.3,1,1"');
    expect(stderr).toContain(`line ${rows.length + 3}, position:`);
    expect(stderr).toContain(`line ${rows.length + 4}, columns: "v0,2026"`);
    expect(table).toBe(screenFiles([file("pings.csv")]).table);
  });

  it("reads junctions as GeoJSON and times of a zone", () => {
    const feature = { type: "Feature", geometry: { type: "Point", coordinates: [-38.3, 45.6] }, properties: { junction_id: "X1", name: "Mill Lane" } };
    const junctions = put("junctions.geojson", JSON.stringify({ type: "FeatureCollection", features: [feature] }));
    // The Azores keep UTC - 1 h in winter.
    const local = put("local.csv", [PING_HEADER, ...rows].join("\n").replaceAll("T08:", "T07:").replaceAll(".000Z", ""));
    const late = rows.some((row) => row.includes("T09:"));
    expect(late).toBe(false);
    const { table } = screenFiles([local], junctions, "--timezone", "Atlantic/Azores");
    expect(table).toBe(screenFiles([file("pings.csv")]).table);
    const refused = screenFiles([local]);
    expect([refused.code, refused.stderr]).toEqual([1, expect.stringContaining("the times carry no zone. Say which is meant with --timezone.")]);
  });

  it.each([
    ["an empty file", "", "is empty"],
    ["random bytes", Uint8Array.from({ length: 4096 }, (_, i) => (i * 7919 + (i >> 4) * 13) & 255), "This is not a text file."],
    ["a file without positions", "vehicle_id,timestamp,speed\nv,2026-03-02T08:00:00Z,3\n", "has no column for lat, lon"],
    ["prose", "Once upon a time\nthere was a junction\n", "has no column for vehicle_id, timestamp, lat, lon"],
    ["a packed file that was cut off", gzipSync(rows.join("\n")).subarray(0, 5000), "cut off"],
    ["a file of bad rows only", `${PING_HEADER}\nv,never,1,1,1,1\n`, "No row of the pings could be used."],
  ])("ends with 1 and a sentence for %s", (_, content, sentence) => {
    const path = put("broken", content);
    const { code, stderr } = screenFiles([path]);
    expect(stderr).toContain(sentence);
    expect(stderr).not.toContain("    at ");
    expect(code).toBe(1);
  });

  it.each([
    [["--pings", "nowhere.csv", "--junctions", "nowhere.csv", "--out", "/tmp/x.csv"], "nowhere.csv does not exist."],
    [["--junctions", "j.csv", "--out", "o.csv"], "--pings FILE is missing."],
    [["--pings", "p.csv", "--out", "o.csv"], "--junctions FILE is missing."],
    [["--pings", "p.csv", "--junctions", "j.csv"], "--out FILE is missing."],
    [["--pings", "p.csv", "--junctions", "j.csv", "--out", "o.csv", "--drive-side", "middle"], "neither right nor left"],
    [["--pings", "p.csv", "--junctions", "j.csv", "--out", "o.csv", "--timezone", "Mars/North"], "is no time zone"],
    [["--pings", "p.csv", "--junctions", "j.csv", "--out", "/no/such/folder/o.csv"], "does not exist or is closed"],
    [["--verbose"], "Unknown option '--verbose'"],
    [["pings.csv"], '"pings.csv" stands alone'],
  ])("ends with 1 and a sentence for %j", (args, sentence) => {
    const { code, stderr } = screen(...args);
    expect(stderr).toContain(sentence);
    expect(code).toBe(1);
  });
});
