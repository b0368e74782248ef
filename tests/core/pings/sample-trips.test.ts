import { describe, expect, it } from "vitest";
import { cleanPings } from "@/core/pings/clean";
import { sampleTrips } from "@/core/pings/sample-trips";
import { columnsOf } from "../two-crossings";

/** 100 vehicles, one setting off each minute, with 10 pings 5 s apart. */
const rows = Array.from({ length: 1000 }, (_, i) => {
  const vehicle = Math.floor(i / 10);
  return [vehicle, vehicle * 60_000 + (i % 10) * 5000, 45.6 + (i % 10) * 0.0005, -38.3, 11, 0];
});
const { trips } = cleanPings(columnsOf(rows));

describe("a sample of trips", () => {
  it("holds whole trips, as many as asked for, evenly over time", () => {
    const sample = sampleTrips(trips, 250);
    expect([sample.count, sample.length]).toEqual([25, 250]);
    // One of every four vehicles.
    expect([...sample.tripVehicle].map((vehicle) => Math.floor(vehicle / 4))).toEqual(Array.from({ length: 25 }, (_, k) => k));
    for (let k = 0; k < sample.count; k++) {
      const first = sample.tripOffset[k];
      expect(sample.tripOffset[k + 1] - first).toBe(10);
      expect(sample.tMs[first]).toBe(sample.tripVehicle[k] * 60_000);
      expect(sample.lat[first + 9]).toBe(45.6 + 9 * 0.0005);
    }
  });

  it("follows no pattern of the trips: not always the first, second, third or last of four", () => {
    const places = [...sampleTrips(trips, 250).tripVehicle].map((vehicle) => vehicle % 4);
    expect(new Set(places).size).toBe(4);
  });

  it("is all trips where they are no more", () => {
    expect(sampleTrips(trips, 1000)).toBe(trips);
  });

  it("does not depend on the order of the rows", () => {
    const turned = cleanPings(columnsOf([...rows].reverse())).trips;
    expect(sampleTrips(turned, 300)).toEqual(sampleTrips(trips, 300));
  });

  it("is empty of an empty list", () => {
    expect(sampleTrips(cleanPings(columnsOf([])).trips, 10).count).toBe(0);
  });
});
