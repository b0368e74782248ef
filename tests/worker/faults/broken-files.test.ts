import { readdir } from "node:fs/promises";
import { join } from "node:path";
import { Readable } from "node:stream";
import { gzipSync } from "node:zlib";
import { count, eq, sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { seededRandom } from "@/core/stats/random";
import { auditEvents, traversals, uploads } from "@/db/schema";
import { JOBS } from "@/jobs/definitions";
import { prepareQueues } from "@/jobs/queue";
import { getUpload } from "@/services/uploads/get-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import type { Storage } from "@/storage/storage";
import { ingestUploadHandler } from "@/worker/handlers/ingest-upload";
import { runJobs, type JobRunner } from "@/worker/run-jobs";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, testPlace, type TestContext } from "@tests/support/database";

const FULL = "There is no room left for files on the server, so nothing of this one was kept. Ask your administrator to make room, then try again.";

let engineer: TestContext;
let job: TestContext;
let runner: JobRunner;
/** What the worker and the engineer write to: the folder, or a stand-in of a full disk. */
let isFull = false;

function fullable(folder: Storage): Storage {
  return {
    ...folder,
    async put(key, content) {
      if (!isFull) return folder.put(key, content);
      for await (const chunk of content) if (chunk) throw Object.assign(new Error("ENOSPC: no space left on device, write"), { code: "ENOSPC" });
      return 0;
    },
  };
}

beforeAll(async () => {
  const { url, database } = await testPlace();
  await prepareQueues(url, JOBS);
  engineer = await testContext("engineer");
  engineer.storage = fullable(engineer.storage);
  job = await testContext("job", { storage: engineer.storage });
  runner = await runJobs({ databaseUrl: url, pool: database.pool, handlers: [ingestUploadHandler], concurrency: 1, contextFor: () => job });
  await read("junctions", "junctions.csv", JUNCTIONS_CSV);
});

afterAll(() => runner.stop());

const receive = (kind: "pings" | "junctions", name: string, content: string | Uint8Array) =>
  receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));

/** Through the queue, until it is in or refused. */
async function read(kind: "pings" | "junctions", name: string, content: string | Uint8Array) {
  const { uploadId, detected } = await receive(kind, name, content);
  return readReceived(uploadId, detected.mapping);
}

async function readReceived(uploadId: string, mapping: Parameters<typeof startUpload>[1]["mapping"]) {
  await startUpload(engineer, { uploadId, mapping, supplier: null });
  return vi.waitUntil(
    async () => {
      const view = await getUpload(engineer, { uploadId });
      return view.state === "done" || view.state === "failed" ? view : null;
    },
    { timeout: 30_000, interval: 50 },
  );
}

async function traces() {
  const one = async (table: typeof uploads | typeof traversals | typeof auditEvents) => (await job.db.select({ n: count() }).from(table))[0].n;
  const { folder } = await testPlace();
  return { uploads: await one(uploads), traversals: await one(traversals), trail: await one(auditEvents), files: (await readdir(join(folder, "uploads"))).sort() };
}

let day = 3;
/** Pings of a day that no other test has brought. */
const freshPings = () => crossingPings({ vehicles: 40, startMs: Date.parse("2026-03-01T08:00:00Z") + day++ * 86_400_000 });

async function expectQueueGoesOn(): Promise<void> {
  const view = await read("pings", "next.csv", freshPings());
  expect(view).toMatchObject({ state: "done", report: { traversals: 40 } });
}

describe("a file that does not arrive whole", () => {
  it("leaves nothing behind when the connection is cut", async () => {
    const before = await traces();
    const bytes = Buffer.from(freshPings());
    async function* cut() {
      yield bytes.subarray(0, bytes.length / 2);
      throw new Error("aborted");
    }
    await expect(receiveUpload(engineer, { kind: "pings", name: "cut.csv" }, cut())).rejects.toThrow("aborted");
    expect(await traces()).toEqual(before);
    await expectQueueGoesOn();
  });

  it("leaves nothing behind, and says so, when the disk is full", async () => {
    const before = await traces();
    isFull = true;
    try {
      await expect(receive("pings", "large.csv", freshPings())).rejects.toMatchObject({ code: "full", message: FULL });
    } finally {
      isFull = false;
    }
    expect(await traces()).toEqual(before);
    await expectQueueGoesOn();
  });
});

describe("a file that cannot be used", () => {
  const packed = gzipSync(crossingPings({ vehicles: 3000 }));

  it.each([
    ["cut-off gzip", packed.subarray(0, packed.length - 1000), "The gzip data end too early: the file is cut off. Send it again."],
    ["gzip with a damaged middle", damaged(packed), "The gzip data are damaged and cannot be unpacked. Send the file again."],
  ])("is refused while it is read: %s", async (_, content, sentence) => {
    const before = await traces();
    const view = await read("pings", "broken.csv.gz", content);
    expect(view).toMatchObject({ state: "failed", failure: sentence, report: null, hasRejects: false });
    expect((await traces()).traversals).toBe(before.traversals);
    await expectQueueGoesOn();
  });

  it.each([
    ["random bytes", randomBytes(200_000), "This is not a text file. Send CSV (UTF-8) or GeoJSON, packed with gzip if you like."],
    ["a bomb of zeros", gzipSync(new Uint8Array(100 * 2 ** 20)), "This is not a text file. Send CSV (UTF-8) or GeoJSON, packed with gzip if you like."],
  ])("is refused when it arrives, and leaves nothing: %s", async (_, content, sentence) => {
    const before = await traces();
    await expect(receive("pings", "odd.csv", content)).rejects.toMatchObject({ code: "invalid", message: sentence });
    expect(await traces()).toEqual(before);
  });

  it("is refused while it is read: a bomb behind a good beginning", async () => {
    const bomb = gzipSync(Buffer.concat([Buffer.from(freshPings()), Buffer.alloc(100 * 2 ** 20, 10)]));
    const view = await read("pings", "bomb.csv.gz", bomb);
    expect(view).toMatchObject({ state: "failed", failure: "The gzip data unpack to far more than a data file would. The file was refused." });
    await expectQueueGoesOn();
  });
});

describe("a disk that fills up while a file is read", () => {
  it("fails the file by a sentence, keeps nothing of it, and lets it be started again", async () => {
    const lines = freshPings().split("\n");
    for (let i = 0; i < 200; i++) lines.splice(3, 0, "v1,not a time,45.6,-38.3,10,0");
    const { uploadId, detected } = await receive("pings", "rejects.csv", lines.join("\n"));
    const before = await traces();
    isFull = true;
    try {
      expect(await readReceived(uploadId, detected.mapping)).toMatchObject({ state: "failed", failure: FULL, hasRejects: false });
    } finally {
      isFull = false;
    }
    expect(await traces()).toEqual({ ...before, trail: before.trail + 1 });
    await expectQueueGoesOn();
    expect(await readReceived(uploadId, detected.mapping)).toMatchObject({ state: "done", report: { traversals: 40, rejected: { time: 200 } } });
    expect((await job.db.select({ n: count() }).from(traversals).where(eq(traversals.uploadId, uploadId)))[0].n).toBe(40);
    expect((await job.db.execute(sql`select 1 from pgboss.job where name = 'ingest-upload' and state <> 'completed'`)).rows).toEqual([]);
  });
});

function damaged(gzip: Buffer): Buffer {
  const copy = Buffer.from(gzip);
  copy.fill(0x55, copy.length >> 1, (copy.length >> 1) + 64);
  return copy;
}

function randomBytes(length: number): Uint8Array {
  const random = seededRandom(7);
  return Uint8Array.from({ length }, () => Math.floor(random() * 256));
}
