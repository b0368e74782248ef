import { describe, expect, it } from "vitest";
import { FeedPing } from "@/domain/feed";
import { readNdjsonPings } from "@/formats/pings/ndjson-pings";
import { pingRows, WRITTEN_PINGS } from "@/formats/pings/write-pings";
import { VehicleNames } from "@/formats/vehicle-names";
import { cut, pingsOf } from "./streams";

const bytesOf = (text: string) => new TextEncoder().encode(text);

describe("pings as NDJSON", () => {
  it("are read as they stand: text with a zone or ms, km/h, a heading below zero", () => {
    const names = new VehicleNames();
    const { counts, batches } = readNdjsonPings(
      bytesOf(
        '{"vehicle_id":"bus 7","timestamp":"2026-03-03T10:00:00+02:00","lat":45.6,"lon":-38.3,"speed_kmh":36,"heading":-90}\r\n' +
          '{"vehicle_id":7,"timestamp":1772524800500,"lat":45.6,"lon":-38.3}\n' +
          '{"vehicle_id":"bus 7","timestamp":"2026-03-03T08:00:02Z","lat":45.6,"lon":-38.3,"speed_kmh":null,"heading":null}',
      ),
      names,
    );
    expect(counts).toMatchObject({ rowsRead: 3, accepted: 3, rejected: {} });
    const [batch] = batches;
    expect(Array.from({ length: batch.length }, (_, i) => names.nameOf(batch.vehicle[i]))).toEqual(["bus 7", "7", "bus 7"]);
    expect([...batch.tMs.subarray(0, 3)]).toEqual([1772524800000, 1772524800500, 1772524802000]);
    expect([...batch.speedMs.subarray(0, 3)]).toEqual([10, NaN, NaN]);
    expect([...batch.headingDeg.subarray(0, 3)]).toEqual([270, NaN, NaN]);
  });

  it("keep their line when they are no good", () => {
    const { counts } = readNdjsonPings(bytesOf('\n{"vehicle_id":"a"}\n[1]\n{"vehicle_id":"a","timestamp":"2026-03-03T08:00:02","lat":45,"lon":1}\n'), new VehicleNames());
    expect(counts.samples.map((row) => [row.line, row.reason])).toEqual([[2, "time"], [3, "columns"], [4, "time"]]);
    expect(counts).toMatchObject({ rowsRead: 3, accepted: 0 });
  });

  it("come in several batches of columns where there are many", () => {
    const lines = Array.from({ length: 10 }, (_, i) => JSON.stringify({ vehicle_id: `v${i}`, timestamp: 1772524800000 + i, lat: 45, lon: 1 }));
    const { batches } = readNdjsonPings(bytesOf(lines.join("\n")), new VehicleNames(), 4);
    expect(batches.map((batch) => batch.length)).toEqual([4, 4, 2]);
  });

  it("are described by the schema that the interface publishes", () => {
    const ping = { vehicle_id: "a", timestamp: "2026-03-03T08:00:02Z", lat: 45, lon: 1 };
    expect(FeedPing.safeParse(ping).success).toBe(true);
    expect(FeedPing.safeParse({ ...ping, timestamp: "2026-03-03T08:00:02" }).success).toBe(false);
    expect(FeedPing.safeParse({ ...ping, lat: 95 }).success).toBe(false);
  });
});

describe("written rows of pings", () => {
  it("are read again as they were, whatever the vehicle is called", async () => {
    const names = new VehicleNames();
    const lines = ['say "hi", bus', "-5", "=1+1", "größe"].map((vehicle_id, i) =>
      JSON.stringify({ vehicle_id, timestamp: 1772524800000 + i, lat: 45.1234567, lon: -38.7654321, ...(i % 2 === 0 && { speed_kmh: 36, heading: 12.5 }) }),
    );
    const { batches } = readNdjsonPings(bytesOf(lines.join("\n")), names);
    const { counts, pings } = await pingsOf(cut(bytesOf(pingRows(batches[0], names))), WRITTEN_PINGS);
    expect(counts).toMatchObject({ accepted: 4, rejected: {} });
    expect(pings.map((ping) => ping.vehicle)).toEqual(['say "hi", bus', "-5", "=1+1", "größe"]);
    expect(pings[0]).toMatchObject({ time: "2026-03-03T08:00:00.000Z", lat: 45.1234567, lon: -38.7654321, speedMs: 10, headingDeg: 12.5 });
    expect(pings[1]).toMatchObject({ speedMs: NaN, headingDeg: NaN });
  });
});
