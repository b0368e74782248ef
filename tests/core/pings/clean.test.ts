import { describe, expect, it } from "vitest";
import { cleanPings } from "@/core/pings/clean";
import { groupByVehicle } from "@/core/pings/group-by-vehicle";
import type { PingColumns } from "@/core/types";

/** Rows of vehicle, seconds, metres north of 45 N, optional speed in m/s and heading. */
function pingsOf(rows: [number, number, number, number?, number?][]): PingColumns {
  return {
    length: rows.length,
    vehicle: Uint32Array.from(rows, (row) => row[0]),
    tMs: Float64Array.from(rows, (row) => row[1] * 1000),
    lat: Float64Array.from(rows, (row) => 45 + row[2] / 111131.777),
    lon: new Float64Array(rows.length),
    speedMs: Float32Array.from(rows, (row) => row[3] ?? NaN),
    headingDeg: Float32Array.from(rows, (row) => row[4] ?? NaN),
  };
}

describe("cleaning", () => {
  it("groups by vehicle in time order", () => {
    const { offsets, order } = groupByVehicle(pingsOf([[1, 5, 0], [0, 3, 0], [1, 2, 0], [0, 1, 0]]));
    expect([...offsets]).toEqual([0, 2, 4]);
    expect([...order]).toEqual([3, 1, 2, 0]);
  });

  it("drops a second ping of one instant and keeps the fuller one", () => {
    const { trips, report } = cleanPings(pingsOf([[0, 0, 0, 10, 0], [0, 5, 50], [0, 5, 50, 11, 0], [0, 10, 100, 10, 0]]));
    expect(report.duplicates).toBe(1);
    expect([...trips.speedMs]).toEqual([10, 11, 10]);
  });

  it("drops a jump of 2 km in 5 s and goes on from the ping before it", () => {
    const { trips, report } = cleanPings(pingsOf([[0, 0, 0], [0, 5, 50], [0, 10, 2100], [0, 15, 150], [0, 20, 200]]));
    expect(report.jumps).toBe(1);
    expect(trips.count).toBe(1);
    expect([...trips.tMs]).toEqual([0, 5000, 15_000, 20_000]);
  });

  it("drops a first ping that lies far from all that follow", () => {
    const { trips, report } = cleanPings(pingsOf([[0, 0, 5000], [0, 5, 50], [0, 10, 100], [0, 15, 150]]));
    expect(report.jumps).toBe(1);
    expect([...trips.tMs]).toEqual([5000, 10_000, 15_000]);
  });

  it("begins a new trip after more than 180 s of silence, not after 180 s", () => {
    const { trips } = cleanPings(pingsOf([[0, 0, 0], [0, 180, 10], [0, 361, 20]]));
    expect([...trips.tripOffset]).toEqual([0, 2, 3]);
  });

  it("derives speed and heading from displacements where none are given", () => {
    const { trips } = cleanPings(pingsOf([[0, 0, 0], [0, 5, 50], [0, 10, 100]]));
    expect(trips.hasSpeed).toBe(false);
    expect(trips.speedMs[1]).toBeCloseTo(10, 3);
    expect(trips.headingDeg[1]).toBe(0);
  });

  it("turns a standing vehicle the way it moves on", () => {
    const { trips } = cleanPings(pingsOf([[0, 0, 0, 10, 180], [0, 5, -30, 0, 77], [0, 10, -30, 0, 200], [0, 15, -60, 8, 180]]));
    expect([...trips.headingDeg]).toEqual([180, 180, 180, 180]);
  });

  it("states the median interval", () => {
    expect(cleanPings(pingsOf([[0, 0, 0], [0, 5, 1], [0, 10, 2], [0, 25, 3]])).trips.medianIntervalS).toBe(5);
  });
});
