import { describe, expect, it } from "vitest";
import { emptyColumns } from "@/formats/pings/ping-columns";
import { openPingStore } from "@/services/ingest/ping-store";
import type { PingColumns } from "@/core/types";

function batchOf(rows: [vehicle: number, tMs: number, lat: number, speedMs: number][]): PingColumns {
  const batch = emptyColumns(rows.length);
  batch.length = rows.length;
  rows.forEach(([vehicle, tMs, lat, speedMs], i) => {
    batch.vehicle[i] = vehicle;
    batch.tMs[i] = tMs;
    batch.lat[i] = lat;
    batch.lon[i] = -38.25;
    batch.speedMs[i] = speedMs;
    batch.headingDeg[i] = NaN;
  });
  return batch;
}

async function contents(memoryPings: number): Promise<string[]> {
  const store = openPingStore({ memoryPings });
  const seen: string[] = [];
  try {
    await store.add(batchOf([[0, 1000, 45.6, 10], [1, 1500, 45.7, NaN]]));
    await store.add(batchOf([[0, 6000, 45.6001, 0], [49, 2000, 45.8, 3]]));
    expect(store.length).toBe(4);
    for await (const bucket of store.buckets()) {
      for (let i = 0; i < bucket.length; i++) {
        seen.push([bucket.vehicle[i], bucket.tMs[i], bucket.lat[i], bucket.lon[i], bucket.speedMs[i], bucket.headingDeg[i]].join(" "));
      }
    }
  } finally {
    await store.close();
  }
  return seen;
}

describe("ping store", () => {
  it("gives back on disk exactly what it gives back in memory, vehicles whole", async () => {
    const inMemory = await contents(100);
    expect(inMemory).toContain("1 1500 45.7 -38.25 NaN NaN");
    expect(inMemory).toHaveLength(4);
    const onDisk = await contents(1);
    expect([...onDisk].sort()).toEqual([...inMemory].sort());
    expect(onDisk.indexOf("0 6000 45.6001 -38.25 0 NaN")).toBe(onDisk.indexOf("0 1000 45.6 -38.25 10 NaN") + 1);
  });
});
