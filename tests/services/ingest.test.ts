import { Readable } from "node:stream";
import { text } from "node:stream/consumers";
import { count, eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import type { Network } from "@/core/types";
import { decodeScreenDay, encodeScreenDay } from "@/core/scores/screen-day-codec";
import { exits, junctions, legs, screenDays, traversals, uploads } from "@/db/schema";
import { dayFromIso } from "@/domain/local-time";
import { ScreenQuery } from "@/domain/screen";
import { StripQuery } from "@/domain/junction";
import type { UploadKind } from "@/domain/upload";
import { raiseDataVersion } from "@/services/catalogue/catalogue";
import { getCoverage } from "@/services/coverage/get-coverage";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { readJunctionPoints, readNetwork, storeNetwork } from "@/services/ingest/network-rows";
import { exportScreen } from "@/services/screens/export-screen";
import { rankJunctions } from "@/services/screens/rank-junctions";
import { getJunction } from "@/services/junctions/get-junction";
import { exportStrip } from "@/services/strips/export-strip";
import { getTracks } from "@/services/strips/get-tracks";
import { decodeTrackSet } from "@/core/strips/track-set";
import { getUpload, openRejects } from "@/services/uploads/get-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;

async function upload(kind: UploadKind, name: string, content: string | Buffer): Promise<string> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: "Harbour Fleet" });
  await ingestUpload(job, { uploadId });
  return uploadId;
}

/** On the WGS 84 ellipsoid, near 45.6 N. */
const metresPerLat = (lat: number) => 111_132.954 - 559.822 * Math.cos((2 * lat * Math.PI) / 180) + 1.175 * Math.cos((4 * lat * Math.PI) / 180);
const metresPerLon = (lat: number) => 111_412.84 * Math.cos((lat * Math.PI) / 180) - 93.5 * Math.cos((3 * lat * Math.PI) / 180);

const view = (uploadId: string) => getUpload(engineer, { uploadId });

async function sums() {
  const [row] = await job.db
    .select({ rows: count(), delay: sql<number>`round(sum(${traversals.delayS})::numeric, 3)`.mapWith(Number) })
    .from(traversals);
  const [days] = await job.db.select({ rows: count() }).from(screenDays);
  return { ...row, days: days.rows };
}

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
  await upload("junctions", "junctions.csv", JUNCTIONS_CSV);
});

describe("ingest", () => {
  it("reads junctions in and counts what is new", async () => {
    const id = await upload("junctions", "again.csv", `${JUNCTIONS_CSV}X2,,45.7,-38.2,,,,\n`);
    const { state, report } = await view(id);
    expect(state).toBe("done");
    expect(report).toMatchObject({ rowsRead: 2, accepted: 1, rejected: { name: 1 }, created: 0, updated: 1 });
    expect(await job.db.select({ n: count() }).from(junctions)).toEqual([{ n: 1 }]);
  });

  it("turns pings into traversals, legs and a ranked junction", async () => {
    const id = await upload("pings", "crossing.csv", crossingPings());
    const { state, report } = await view(id);
    expect(state).toBe("done");
    // 240 vehicles cross once each; all of them begin 420 m out and end 300 m past.
    expect(report).toMatchObject({ vehicles: 240, traversals: 240, junctionsCovered: 1, legsFound: 4, rejected: {} });
    const { rows, basis } = await rankJunctions(engineer, ScreenQuery.parse({ period: "all" }));
    expect(rows).toHaveLength(1);
    expect(basis).toMatchObject({ traversals: 240, firstDate: "2026-03-03", lastDate: "2026-03-03" });
    // Half of the vehicles wait 30 s, the others drive through at cruising speed: 15 s on average.
    expect(rows[0].delay?.value).toBeGreaterThan(14.5);
    expect(rows[0].delay?.value).toBeLessThan(15.5);
    expect(rows[0].needles).toHaveLength(4);
  });

  it("serves the junction's legs by their compass and the tracks of each", async () => {
    const [junction] = await job.db.select({ id: junctions.id }).from(junctions);
    const when = ScreenQuery.parse({ period: "all" });
    const found = await getJunction(engineer, { junctionId: junction.id, when });
    expect(found.legs.map((leg) => Math.round(leg.bearingDeg / 90) % 4).sort()).toEqual([0, 1, 2, 3]);
    const seen = found.movements.filter((movement) => movement.vehicles > 0);
    expect(seen.map((movement) => [movement.turn, movement.vehicles])).toEqual(Array(4).fill(["through", 60]));
    const set = decodeTrackSet((await getTracks(engineer, { legId: found.legs[0].id, query: StripQuery.parse({ period: "all" }) })).buffer);
    expect(set.tracks).toBe(60);
  });

  it("counts coverage once for each state of the data", async () => {
    const coverage = await getCoverage(engineer);
    expect(coverage).toEqual({
      junctions: 1,
      covered: 1,
      days: [{ date: "2026-03-03", traversals: 240, junctions: 1, medianIntervalS: coverage.days[0].medianIntervalS }],
      uncovered: [],
    });
    expect(await getCoverage(engineer)).toBe(coverage);
    await raiseDataVersion(job.db);
    const afresh = await getCoverage(engineer);
    expect(afresh).not.toBe(coverage);
    expect(afresh).toEqual(coverage);
  });

  it("exports a strip in the cells that a page would draw", async () => {
    const [{ id }] = await job.db.select({ id: legs.id }).from(legs);
    const lines = (await text(Readable.from(await exportStrip(engineer, { legId: id, query: StripQuery.parse({ period: "all", cellS: 5 }) })))).split("\n");
    // A day has 1,440 minutes, and no more columns are drawn.
    expect(lines[0].split(",")[7]).toBe("cell_width_s");
    expect(new Set(lines.slice(1, -1).map((line) => line.split(",")[7]))).toEqual(new Set(["60"]));
    // A cell with one vehicle would be a piece of that vehicle's path.
    expect(lines[0].split(",")[5]).toBe("vehicles_seen");
    expect(lines.length).toBeGreaterThan(2);
    for (const line of lines.slice(1, -1)) {
      const cells = line.trim().split(",");
      expect(Number(cells[5])).toBeGreaterThanOrEqual(2);
      expect(cells.at(-1)).toBe("2");
    }
  });

  it("counts an overlapping file once, and the very same file not at all", async () => {
    const before = await sums();
    const id = await upload("pings", "crossing-again.csv", crossingPings());
    expect((await view(id)).report).toMatchObject({ traversals: 0, knownTraversals: 240 });
    expect((await sums()).rows).toBe(before.rows);
    const { sameAs } = await receiveUpload(engineer, { kind: "pings", name: "copy.csv" }, Readable.from([Buffer.from(crossingPings())]));
    expect(sameAs).not.toBeNull();
  });

  it("keeps streets where they are, and what a file has no column for, when it moves a junction", async () => {
    const where = (rows: { line: number[] }[], lat: number, lon: number) =>
      rows.map(({ line }) => [lat + line[1] / metresPerLat(lat), lon + line[0] / metresPerLon(lat)].map((degrees) => Math.round(degrees * 1e6)));
    const before = await job.db.select().from(legs).orderBy(legs.id);
    await upload("junctions", "moved.csv", "junction_id,name,lat,lon\nX1,Cross Street,45.6001,-38.3002\n");
    const [junction] = await job.db.select().from(junctions);
    expect(junction).toMatchObject({ name: "Cross Street", lat: 45.6001, lon: -38.3002, cycleS: 90, district: "North", corridorOrder: 1 });
    expect(junction.corridorId).not.toBeNull();
    const after = await job.db.select().from(legs).orderBy(legs.id);
    // 0.0001 degrees of latitude are 11.1 m.
    expect(after[0].line[1]).toBeCloseTo(before[0].line[1] - 11.1, 1);
    expect(where(after, 45.6001, -38.3002)).toEqual(where(before, 45.6, -38.3));
    await upload("junctions", "back.csv", JUNCTIONS_CSV);
    const restored = await job.db.select().from(legs).orderBy(legs.id);
    restored.forEach((leg, i) => expect(leg.line[0]).toBeCloseTo(before[i].line[0], 4));
  });

  it("changes nothing when a job runs twice", async () => {
    const id = await upload("pings", "later.csv", crossingPings({ startMs: Date.parse("2026-03-04T08:00:00Z") }));
    const before = await sums();
    await ingestUpload(job, { uploadId: id });
    expect(await sums()).toEqual(before);
  });

  it("keeps the identity of legs from file to file", async () => {
    const before = await job.db.select({ id: legs.id, code: legs.code }).from(legs).orderBy(legs.id);
    await upload("pings", "third.csv", crossingPings({ startMs: Date.parse("2026-03-05T08:00:00Z"), vehicles: 80 }));
    expect(await job.db.select({ id: legs.id, code: legs.code }).from(legs).orderBy(legs.id)).toEqual(before);
  });

  it("gives no figure, not only no rank, where hardly anybody was seen", async () => {
    await upload("pings", "few.csv", crossingPings({ startMs: Date.parse("2026-03-07T08:00:00Z"), vehicles: 4 }));
    const { rows } = await rankJunctions(engineer, ScreenQuery.parse({ period: "all", days: "saturday" }));
    expect(rows[0]).toMatchObject({ evidence: "none", vehicles: 4, days: 1, rank: null, delay: null, p95S: null, los: null, hoursSeen: null, reachM: null, spill: null });
    expect(rows[0].needles.map(({ delayS, reachM }) => [delayS, reachM])).toEqual(Array(4).fill([null, null]));
  });

  it("drops exits that the core no longer knows", async () => {
    const [{ junctionId, methodVersion }] = await job.db.select().from(exits);
    const before = await job.db.select({ n: count() }).from(exits);
    await job.db.insert(exits).values({ code: "X1:out:stray", junctionId, bearingDeg: 45, line: [0, 0, 50, 50], support: 1, methodVersion });
    const points = await readJunctionPoints(job.db);
    const network = (await readNetwork(job.db, points, "right")) as Network;
    expect(network.exits.pop()?.id).toBe("X1:out:stray");
    await storeNetwork(job.db, network, points.map((point) => point.key));
    expect(await job.db.select({ n: count() }).from(exits)).toEqual(before);
  });

  it("says by a sentence that hours end before they begin", async () => {
    await expect(rankJunctions(engineer, ScreenQuery.parse({ from: 600, to: 600 }))).rejects.toThrow("The hours must end after they begin.");
  });

  it("never ranks what another method has measured, and says how many files wait for being read again", async () => {
    const query = ScreenQuery.parse({ period: "all", since: "2026-03-05", until: "2026-03-05" });
    const before = await rankJunctions(engineer, query);
    const [slice] = await job.db.select().from(screenDays).where(eq(screenDays.day, dayFromIso("2026-03-05")));
    const [other] = await job.db.select({ id: uploads.id }).from(uploads).where(eq(uploads.fileName, "crossing-again.csv"));
    const older = encodeScreenDay({ ...decodeScreenDay(slice.payload), methodVersion: slice.methodVersion - 1 });
    const [{ id }] = await job.db
      .insert(screenDays)
      .values({ ...slice, id: undefined, uploadId: other.id, methodVersion: slice.methodVersion - 1, payload: older })
      .returning({ id: screenDays.id });
    await raiseDataVersion(job.db);
    expect(await rankJunctions(engineer, query)).toEqual({ ...before, basis: { ...before.basis, waitingFiles: 1 } });
    await job.db.delete(screenDays).where(eq(screenDays.id, id));
  });

  it("reports rejected rows with their lines and keeps the good ones", async () => {
    const lines = crossingPings({ startMs: Date.parse("2026-03-06T08:00:00Z"), vehicles: 40 }).split("\n");
    lines.splice(3, 0, "v1,not a time,45.6,-38.3,10,0", "v1,1772784000000,95.0,-38.3,10,0");
    const id = await upload("pings", "dirty.csv", lines.join("\n"));
    const { report, hasRejects } = await view(id);
    expect(report).toMatchObject({ rejected: { time: 1, position: 1 }, traversals: 40 });
    expect(report?.samples.map((row) => [row.line, row.reason])).toEqual([[4, "time"], [5, "position"]]);
    expect(hasRejects).toBe(true);
    expect(await text(await openRejects(engineer, { uploadId: id }))).toContain("4,time,The time cannot be read.,\"v1,not a time,45.6,-38.3,10,0\"");
  });

  it("fails a file without one good row by a sentence, and leaves everything as it was", async () => {
    const before = await sums();
    const id = await upload("pings", "empty.csv", "vehicle_id,timestamp,lat,lon\nv1,yesterday,45.6,-38.3\n");
    const { state, failure, report } = await view(id);
    expect(state).toBe("failed");
    expect(failure).toContain("No row");
    expect(report?.rejected).toEqual({ time: 1 });
    expect(await sums()).toEqual(before);
  });

  it("exports the ranked list with units in the header", async () => {
    let csv = "";
    for await (const part of await exportScreen(engineer, ScreenQuery.parse({ period: "all" }))) csv += part;
    const [header, first] = csv.split("\n");
    expect(header).toContain("mean_delay_s_per_veh");
    expect(first.split(",")[3]).toBe("X1");
  });

  it("refuses everyone but engineers and the worker", async () => {
    for (const role of ["technician", "reader", "admin", "nobody"] as const) {
      const ctx = await testContext(role);
      await expect(receiveUpload(ctx, { kind: "pings", name: "x.csv" }, Readable.from(["x"]))).rejects.toThrow();
      await expect(ingestUpload(ctx, { uploadId: "0b6f8e0e-9a0c-4d57-8e05-4c2a3f0f4f10" })).rejects.toThrow();
    }
    expect(await job.db.select({ n: count() }).from(legs).where(eq(legs.locked, true))).toEqual([{ n: 0 }]);
  });
});
