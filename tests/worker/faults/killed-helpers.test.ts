import { join } from "node:path";
import { Readable } from "node:stream";
import { setTimeout as delay } from "node:timers/promises";
import { readdir } from "node:fs/promises";
import { sql } from "drizzle-orm";
import { afterEach, beforeAll, describe, expect, it, vi } from "vitest";
import { seededRandom } from "@/core/stats/random";
import type { UploadKind } from "@/domain/upload";
import { JOBS } from "@/jobs/definitions";
import { prepareQueues } from "@/jobs/queue";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { openFolderStorage } from "@/storage/folder-storage";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, testPlace, type TestContext } from "@tests/support/database";
import { forgetResults, resultChecksums, type Checksums } from "@tests/support/result-checksums";
import { startWorkerProcess, type WorkerProcess } from "@tests/support/worker-process";

/** `KILLS=25 npx vitest run …` for a long look. */
const KILLS = Number(process.env.KILLS ?? 5);
/** Of some 30,000 rows: a dozen pieces a phase. */
const PIECE_ROWS = 2500;

let engineer: TestContext;
let job: TestContext;
let place: { databaseUrl: string; dataDir: string; pieceRows: number };
let uploadId: string;
let start: () => Promise<unknown>;
let undisturbed: Checksums;
const workers: WorkerProcess[] = [];

async function receive(kind: UploadKind, name: string, content: string) {
  const { uploadId: id, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  return { id, start: () => startUpload(engineer, { uploadId: id, mapping: detected.mapping, supplier: null }) };
}

function dayOfPings(): string {
  const lines = crossingPings({ vehicles: 800, everyS: 20, pingS: 2, startMs: Date.parse("2026-03-02T08:00:00Z") }).split("\n");
  for (const at of [5, 9000, 25_000]) lines.splice(at, 0, "v1,not a time,45.6,-38.3,10,0");
  return lines.join("\n");
}

const state = async () => (await job.db.execute<{ state: string }>(sql`select state from uploads where id = ${uploadId}`)).rows[0].state;

/** Pieces that somebody is at: each in a transaction of its own. */
async function piecesInHand(): Promise<number> {
  const { rows } = await job.db.execute<{ n: number }>(
    sql`select count(*)::int as n from pg_stat_activity where datname = current_database() and state = 'idle in transaction' and query like 'select id, kind, inputs%'`,
  );
  return rows[0].n;
}

/** Jobs of dead workers are taken up after a grace and a pause; the test does not wait for either, nor counts the runs. */
async function skipWaiting(): Promise<void> {
  await job.db.execute(sql`update pgboss.job set start_after = now() where state = 'retry' and start_after > now()`);
}

async function afterDeath(): Promise<void> {
  await job.db.execute(sql`update pgboss.job set retry_count = 0, started_on = now() - interval '1 minute' where state = 'active'`);
}

async function until(isIt: (state: string) => boolean, look?: () => Promise<void>): Promise<void> {
  await vi.waitUntil(
    async () => {
      for (const worker of workers) if (worker.hasEnded()) throw new Error(`A worker ended by itself.\n${worker.output()}`);
      await skipWaiting();
      await look?.();
      return isIt(await state());
    },
    { timeout: 90_000, interval: 10 },
  );
}

async function nothingLeft(): Promise<void> {
  await vi.waitFor(async () => {
    await skipWaiting();
    expect((await job.db.execute(sql`select 1 from ingest_pieces`)).rows).toEqual([]);
    expect(await readdir(join(place.dataDir, "storage/pieces")).catch(() => [])).toEqual([]);
    expect((await job.db.execute(sql`select state from pgboss.job where name = 'help-upload' and state <> 'completed'`)).rows).toEqual([]);
  }, 10_000);
}

beforeAll(async () => {
  const { url, folder } = await testPlace();
  place = { databaseUrl: url, dataDir: folder, pieceRows: PIECE_ROWS };
  await prepareQueues(url, JOBS);
  const storage = openFolderStorage(join(folder, "storage"));
  engineer = await testContext("engineer", { storage });
  job = await testContext("job", { storage });
  const junctions = await receive("junctions", "junctions.csv", JUNCTIONS_CSV);
  await junctions.start();
  await ingestUpload(job, { uploadId: junctions.id });
  const file = await receive("pings", "day.csv", dayOfPings());
  ({ id: uploadId, start } = file);
  await start();
  await ingestUpload(job, { uploadId });
  undisturbed = await resultChecksums(job.db);
  expect(undisturbed.traversals.rows).toBe(800);
  await forgetResults(job.db);
});

afterEach(async () => {
  for (const worker of workers.splice(0)) await worker.kill();
});

describe("two workers that share one file", () => {
  let readingMs = 0;

  it("leave the tables as one worker that reads it at once", { timeout: 120_000 }, async () => {
    workers.push(await startWorkerProcess(place), await startWorkerProcess(place));
    let atOnce = 0;
    await start();
    await until((now) => now !== "waiting");
    const beganMs = performance.now();
    await until((now) => now === "done", async () => void (atOnce = Math.max(atOnce, await piecesInHand())));
    readingMs = performance.now() - beganMs;
    expect(atOnce).toBe(2);
    expect(await resultChecksums(job.db)).toEqual(undisturbed);
    await nothingLeft();
    await forgetResults(job.db);
  });

  it("leave them so when one or the other is killed, again and again", { timeout: 60_000 + KILLS * 30_000 }, async () => {
    const random = seededRandom(KILLS);
    let interrupted = 0;
    workers.push(await startWorkerProcess(place), await startWorkerProcess(place));
    await start();
    for (let kill = 0; kill < KILLS; kill++) {
      await until((now) => now === "reading" || now === "done");
      if ((await state()) === "done") {
        expect(await resultChecksums(job.db)).toEqual(undisturbed);
        await forgetResults(job.db);
        await start();
        await until((now) => now === "reading");
      }
      await delay(((kill + random()) / KILLS) * readingMs);
      const [victim] = workers.splice(random() < 0.5 ? 0 : 1, 1);
      await victim.kill();
      if ((await state()) === "reading") interrupted += 1;
      await afterDeath();
      workers.push(await startWorkerProcess(place));
    }
    await until((now) => now === "done");
    expect(interrupted).toBeGreaterThan(0);
    expect(await resultChecksums(job.db)).toEqual(undisturbed);
    await nothingLeft();
  });
});
