import { mkdtemp, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { writeJunctions, writePings } from "@/ops/bench/traffic";

const START_MS = Date.parse("2026-03-02T06:00:00Z");
let folder = "";

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "tailmark-traffic-"));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

async function pings(name: string, rows: number, seed: number): Promise<string> {
  const path = join(folder, name);
  await writePings(path, rows, seed, START_MS);
  return readFile(path, "utf8");
}

describe("generated traffic", () => {
  it("has the rows asked for, the same bytes for the same seed and others for another", async () => {
    const first = await pings("first.csv", 5000, 1);
    expect(first.trimEnd().split("\n")).toHaveLength(5001);
    expect(await pings("again.csv", 5000, 1)).toBe(first);
    expect(await pings("other.csv", 5000, 2)).not.toBe(first);
  });

  it("moves each vehicle by at most what it can drive in 5 s, noise and a corner included", async () => {
    const seen = new Map<string, { tMs: number; lat: number; lon: number }>();
    const farthest = { m: 0, pairs: 0 };
    for (const line of (await pings("moves.csv", 40_000, 3)).trimEnd().split("\n").slice(1)) {
      const [vehicle, tMs, lat, lon] = line.split(",");
      const now = { tMs: Number(tMs), lat: Number(lat), lon: Number(lon) };
      const before = seen.get(vehicle);
      seen.set(vehicle, now);
      if (!before) continue;
      expect(now.tMs - before.tMs).toBe(5000);
      farthest.pairs += 1;
      farthest.m = Math.max(farthest.m, Math.hypot((now.lat - before.lat) * 111_143.5, (now.lon - before.lon) * 78_010.7));
    }
    // 60 m of driving, 6 m from lane to lane and two positions of 4 m noise, six deviations each.
    expect(farthest.m).toBeLessThan(60 + 6 + 2 * 6 * 4);
    expect(farthest.pairs).toBeGreaterThan(30_000);
  });

  it("passes 500 junctions with identifiers of their own", async () => {
    const path = join(folder, "junctions.csv");
    await writeJunctions(path);
    const ids = (await readFile(path, "utf8")).trimEnd().split("\n").slice(1).map((line) => line.split(",")[0]);
    expect(new Set(ids).size).toBe(500);
  });
});
