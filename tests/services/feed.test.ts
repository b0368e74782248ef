import { readdir } from "node:fs/promises";
import { join } from "node:path";
import { Readable } from "node:stream";
import { gzipSync } from "node:zlib";
import { and, avg, count, eq, isNotNull, sql } from "drizzle-orm";
import { beforeAll, beforeEach, describe, expect, it } from "vitest";
import { auditEvents, feedBatches, feedTokens, suppliers, traversals, uploads } from "@/db/schema";
import { BATCHES_PER_MINUTE, FeedReceipt } from "@/domain/feed";
import { JOBS } from "@/jobs/definitions";
import { prepareQueues } from "@/jobs/queue";
import { listFeedTokens, makeFeedToken, revokeFeedToken } from "@/services/feed/feed-tokens";
import { receiveBatch } from "@/services/feed/receive-batch";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { crossingPings } from "@tests/support/crossing";
import { readCrossing } from "@tests/support/crossing-city";
import { forgetResults, resultChecksums } from "@tests/support/result-checksums";
import { testContext, testPlace, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;
let token: string;

const START = "2026-03-03T08:30:00Z";

beforeAll(async () => {
  await prepareQueues((await testPlace()).url, JOBS);
  engineer = await testContext("engineer");
  job = await testContext("job");
  await readCrossing(engineer, job);
});

beforeEach(async () => {
  token = (await makeFeedToken(engineer, { supplier: `Fleet ${Math.round(performance.now() * 1000)}` })).token;
});

interface Sent {
  at?: string;
  token?: string | null;
  key?: string;
}

async function send(content: string | Buffer, { at = START, token: shown = token, key }: Sent = {}): Promise<FeedReceipt> {
  const ctx = await testContext("nobody", { now: new Date(at) });
  const authorization = shown === null ? null : `Bearer ${shown}`;
  return receiveBatch(ctx, { authorization, idempotencyKey: key ?? null }, Readable.from([Buffer.from(content)]));
}

const PING = { vehicle_id: "v1", timestamp: "2026-03-03T08:29:00Z", lat: 45.6, lon: -38.3, speed_kmh: 36, heading: 90 };
const ndjson = (...rows: object[]) => rows.map((row) => JSON.stringify(row)).join("\n");

/** Rows of CSV by time: cuts at the given instants, so that trips are torn apart. */
function batchesByTime(csv: string, cutsMs: number[]): string[] {
  const [header, ...lines] = csv.trim().split("\n");
  const parts: string[][] = Array.from({ length: cutsMs.length + 1 }, () => [header]);
  for (const line of lines) {
    const tMs = Number(line.split(",")[1]);
    parts[cutsMs.filter((cut) => tMs >= cut).length].push(line);
  }
  return parts.map((part) => `${part.join("\n")}\n`);
}

async function hours() {
  return job.db.select().from(uploads).where(isNotNull(uploads.feedHour)).orderBy(uploads.feedHour);
}

async function supplierOf(shown: string): Promise<number> {
  const receipt = await send(ndjson({ ...PING, vehicle_id: "supplier" }), { token: shown });
  const [row] = await job.db.select({ id: feedBatches.supplierId }).from(feedBatches).where(eq(feedBatches.id, String(receipt.batch)));
  return row.id;
}

describe("a feed's token", () => {
  it("is shown once, kept as a hash, and listed without it", async () => {
    const { id, token: made } = await makeFeedToken(engineer, { supplier: "Harbour Taxis" });
    const [row] = await job.db.select().from(feedTokens).where(eq(feedTokens.id, id));
    expect(JSON.stringify(row)).not.toContain(made);
    expect((await listFeedTokens(engineer)).find((view) => view.id === id)).toMatchObject({ supplier: "Harbour Taxis", by: "Test engineer", lastUsedAt: null, revokedAt: null });
    await send(ndjson(PING), { token: made });
    expect((await listFeedTokens(engineer)).find((view) => view.id === id)?.lastUsedAt).toBe(new Date(START).toISOString());
  });

  it("opens nothing once it is revoked, and both are in the trail", async () => {
    const { id, token: made } = await makeFeedToken(engineer, { supplier: "Old Fleet" });
    await revokeFeedToken(engineer, { id });
    await expect(send(ndjson(PING), { token: made })).rejects.toMatchObject({ code: "unauthenticated" });
    await expect(revokeFeedToken(engineer, { id })).rejects.toMatchObject({ code: "not_found" });
    const trail = await job.db.select({ action: auditEvents.action }).from(auditEvents).where(eq(auditEvents.subject, "Old Fleet")).orderBy(auditEvents.id);
    expect(trail.map((row) => row.action)).toEqual(["made feed token", "revoked feed token"]);
  });

  it.each([null, "", "not-a-token"])("%j is refused", async (shown) => {
    await expect(send(ndjson(PING), { token: shown })).rejects.toMatchObject({ code: "unauthenticated" });
  });

  it("takes so many batches in a minute, and more in the next", async () => {
    await job.db.update(feedTokens).set({ minuteBatches: BATCHES_PER_MINUTE, minuteStart: new Date(START) });
    await expect(send(ndjson(PING))).rejects.toMatchObject({ code: "too_many" });
    expect(await send(ndjson(PING), { at: "2026-03-03T08:31:00Z" })).toMatchObject({ accepted: 1 });
  });
});

describe("a batch", () => {
  it("is judged row by row, and the answer says what is wrong", async () => {
    const receipt = await send(
      ndjson(PING, { ...PING, timestamp: "yesterday" }, { ...PING, timestamp: 1772526540000 }, { ...PING, lat: 95 }, { ...PING, vehicle_id: "" }) + "\nnot json\n\n",
    );
    expect(FeedReceipt.parse(receipt)).toMatchObject({ accepted: 2, rejected: 4, repeated: false });
    expect(Object.fromEntries(receipt.reasons.map(({ reason, rows }) => [reason, rows]))).toEqual({ time: 1, position: 1, vehicle: 1, columns: 1 });
    expect(receipt.samples.map(({ line, reason }) => [line, reason])).toEqual([[2, "time"], [4, "position"], [5, "vehicle"], [6, "columns"]]);
  });

  it("may be CSV, and packed", async () => {
    const csv = crossingPings({ vehicles: 3 });
    const rows = csv.trim().split("\n").length - 1;
    expect(await send(gzipSync(csv))).toMatchObject({ accepted: rows, rejected: 0, repeated: false });
    expect(await send(csv)).toMatchObject({ accepted: rows, repeated: true });
  });

  it.each([
    ["", "The batch is empty."],
    ["v1,2026-03-03T08:00:00Z,45.6,-38.3\n", "A batch of CSV begins with a header row, as vehicle_id,timestamp,lat,lon,speed_kmh,heading."],
    ["[{}]", "This is a JSON array. Send one JSON object on each line, without brackets around them or commas between them."],
    ["vehicle_id,timestamp,lat,lon\nv1,2026-03-03 08:00:00,45.6,-38.3\n", "The times carry no zone. Send them as ISO 8601 with a zone or as milliseconds since 1970."],
    ["vehicle_id,when,lat,lon\nv1,soon,45.6,-38.3\n", "The file has no column for timestamp. Name the column or choose it in the mapping."],
    [gzipSync(Buffer.alloc(20_000_001, 32)), "The batch is larger than 20 MB unpacked. Send it in parts."],
    [gzipSync(ndjson(PING)).subarray(0, 40), "The gzip data end too early: the file is cut off. Send it again."],
  ])("that cannot be used is refused by a sentence and leaves nothing: %#", async (content, sentence) => {
    const { folder } = await testPlace();
    const files = async () => (await readdir(join(folder, "feed")).catch(() => [])).length;
    const before = [await files(), (await job.db.select({ n: count() }).from(feedBatches))[0].n];
    await expect(send(content)).rejects.toMatchObject({ code: "invalid", message: sentence });
    expect([await files(), (await job.db.select({ n: count() }).from(feedBatches))[0].n]).toEqual(before);
  });

  it("without one good row is answered and not kept", async () => {
    expect(await send(ndjson({ ...PING, lat: 95 }))).toMatchObject({ batch: null, accepted: 0, rejected: 1 });
  });

  it("sent twice counts once: by its bytes, by its key, one after the other and at the same time", async () => {
    const first = await send(ndjson(PING), { key: "a" });
    expect(await send(ndjson(PING), { key: "b" })).toEqual({ ...first, repeated: true });
    expect(await send(ndjson(PING, PING), { key: "c" })).toMatchObject({ repeated: false });
    await expect(send(ndjson(PING, PING, PING), { key: "a" })).rejects.toMatchObject({ code: "conflict" });
    const other = { ...PING, vehicle_id: "v2" };
    const answers = await Promise.all([1, 2, 3].map(() => send(ndjson(other))));
    expect(answers.filter((answer) => !answer.repeated)).toHaveLength(1);
    expect(new Set(answers.map((answer) => answer.batch)).size).toBe(1);
    const { folder } = await testPlace();
    const kept = await job.db.select({ key: feedBatches.storageKey }).from(feedBatches);
    expect((await readdir(join(folder, "feed"))).length).toBe(kept.length);
  });

  it("of another supplier may hold the same bytes", async () => {
    await send(ndjson(PING));
    const { token: second } = await makeFeedToken(engineer, { supplier: "Second Fleet" });
    expect(await send(ndjson(PING), { token: second })).toMatchObject({ repeated: false });
  });
});

describe("the batches of an hour", () => {
  it("wait some minutes for each other, and for one run together", async () => {
    await job.db.execute(sql`delete from pgboss.job`);
    for (const minute of ["40", "41", "42"]) await send(ndjson({ ...PING, vehicle_id: minute }), { at: `2026-03-04T08:${minute}:00Z` });
    const { rows } = await job.db.execute<{ waits_s: string }>(sql`select extract(epoch from start_after - created_on) as waits_s from pgboss.job where name = 'ingest-upload'`);
    expect(rows.map((row) => Math.round(Number(row.waits_s)))).toEqual([180]);
  });

  const csv = crossingPings({ vehicles: 240, startMs: Date.parse("2026-03-05T08:36:00Z") });
  const at = (minute: number) => Date.parse("2026-03-05T08:00:00Z") + minute * 60_000;

  it("are read in together: a trip over two batches, or over the full hour, is whole", async () => {
    await forgetResults(job.db);
    const direct = await receiveUpload(engineer, { kind: "pings", name: "whole.csv" }, Readable.from([Buffer.from(csv)]));
    await startUpload(engineer, { uploadId: direct.uploadId, mapping: direct.detected.mapping, supplier: null });
    await ingestUpload(job, { uploadId: direct.uploadId });
    const whole = await resultChecksums(job.db);
    expect(whole.traversals.rows).toBe(240);
    await forgetResults(job.db);

    const supplierId = await supplierOf(token);
    const cuts = [41, 46, 51, 56, 61, 66, 71, 76, 81];
    for (const [i, batch] of batchesByTime(csv, cuts.map(at)).entries()) {
      const arrives = new Date(at(cuts[i] ?? 86)).toISOString();
      await send(batch, { at: arrives });
      // As often as batches come, or twice for nothing.
      for (const upload of await hours()) if (upload.supplierId === supplierId) await ingestUpload(job, { uploadId: upload.id });
    }
    const ofFeed = await job.db
      .select({ n: count(), id: traversals.uploadId })
      .from(traversals)
      .innerJoin(uploads, and(eq(uploads.id, traversals.uploadId), eq(uploads.supplierId, supplierId)))
      .groupBy(traversals.uploadId);
    expect(ofFeed).toHaveLength(2);
    expect(ofFeed.reduce((sum, row) => sum + row.n, 0)).toBe(240);
    const stopLines = async () => (await job.db.select({ vehicle: traversals.vehicle }).from(traversals)).map((row) => row.vehicle);
    expect(new Set(await stopLines()).size).toBe(240);
    // Half of the vehicles wait 30 s, the others drive through: 15 s on average, as from one file.
    const [{ delayS }] = await job.db.select({ delayS: avg(traversals.delayS).mapWith(Number) }).from(traversals);
    expect(delayS).toBeGreaterThan(14.5);
    expect(delayS).toBeLessThan(15.5);
    const [{ open }] = await job.db.select({ open: count() }).from(feedBatches).where(and(eq(feedBatches.supplierId, supplierId), eq(feedBatches.isIn, false)));
    expect(open).toBe(0);
  });

  it("take no more room than their hour's file once they are old", async () => {
    const supplierId = await supplierOf(token);
    await send(crossingPings({ vehicles: 8, startMs: Date.parse("2026-03-06T08:00:00Z") }), { at: "2026-03-06T08:10:00Z" });
    await send(crossingPings({ vehicles: 9, startMs: Date.parse("2026-03-06T11:30:00Z") }), { at: "2026-03-06T11:40:00Z" });
    for (const upload of await hours()) if (upload.supplierId === supplierId) await ingestUpload(job, { uploadId: upload.id });
    const rows = await job.db.select({ key: feedBatches.storageKey }).from(feedBatches).where(eq(feedBatches.supplierId, supplierId)).orderBy(feedBatches.receivedAt);
    expect(rows.map((row) => row.key !== null)).toEqual([false, false, true]);
    const [{ name }] = await job.db.select({ name: suppliers.name }).from(suppliers).where(eq(suppliers.id, supplierId));
    expect(name).toMatch(/^Fleet/);
  });
});
