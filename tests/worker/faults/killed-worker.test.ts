import { join } from "node:path";
import { Readable } from "node:stream";
import { setTimeout as delay } from "node:timers/promises";
import { readdir } from "node:fs/promises";
import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it, vi } from "vitest";
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
import { forgetResults, resultChecksums } from "@tests/support/result-checksums";
import { startWorkerProcess, type WorkerProcess } from "@tests/support/worker-process";

/** `KILLS=25 npx vitest run …` for a long look; the moments are spread over the whole of a reading. */
const KILLS = Number(process.env.KILLS ?? 5);
const FILES = 2;

let engineer: TestContext;
let job: TestContext;
const uploadIds: string[] = [];

async function receive(kind: UploadKind, name: string, content: string) {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  return { uploadId, start: () => startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null }) };
}

/** About 30,000 pings of one day, three of them no pings. */
function dayOfPings(day: number): string {
  const lines = crossingPings({ vehicles: 800, everyS: 20, pingS: 2, startMs: Date.parse("2026-03-02T08:00:00Z") + day * 86_400_000 }).split("\n");
  for (const at of [5, 9000, 25_000]) lines.splice(at, 0, "v1,not a time,45.6,-38.3,10,0");
  return lines.join("\n");
}

const stateOf = async (uploadId: string) => (await job.db.execute<{ state: string }>(sql`select state from uploads where id = ${uploadId}`)).rows[0].state;

/** Jobs of a dead worker are taken up after a grace and a pause; the test does not wait for either, nor counts the runs. */
async function skipWaiting(): Promise<void> {
  await job.db.execute(sql`update pgboss.job set start_after = now() where state = 'retry' and start_after > now()`);
}

async function afterDeath(): Promise<void> {
  await job.db.execute(sql`update pgboss.job set retry_count = 0, started_on = now() - interval '1 minute' where state = 'active'`);
}

async function untilState(uploadId: string, isIt: (state: string) => boolean, worker: WorkerProcess): Promise<void> {
  await vi.waitUntil(
    async () => {
      if (worker.hasEnded()) throw new Error(`The worker ended by itself.\n${worker.output()}`);
      await skipWaiting();
      return isIt(await stateOf(uploadId));
    },
    { timeout: 60_000, interval: 15 },
  );
}

let start: (() => Promise<unknown>)[];
let place: { databaseUrl: string; dataDir: string };

beforeAll(async () => {
  const { url, folder } = await testPlace();
  place = { databaseUrl: url, dataDir: folder };
  await prepareQueues(url, JOBS);
  const storage = openFolderStorage(join(folder, "storage"));
  engineer = await testContext("engineer", { storage });
  job = await testContext("job", { storage });
  const junctions = await receive("junctions", "junctions.csv", JUNCTIONS_CSV);
  await junctions.start();
  await ingestUpload(job, { uploadId: junctions.uploadId });
  start = [];
  for (let day = 0; day < FILES; day++) {
    const file = await receive("pings", `day-${day}.csv`, dayOfPings(day));
    uploadIds.push(file.uploadId);
    start.push(file.start);
  }
});

describe("a worker that is killed in the middle of a file, again and again", () => {
  it("leaves the tables as an undisturbed one does", { timeout: 30_000 + KILLS * 20_000 }, async () => {
    let worker = await startWorkerProcess(place);
    let readingMs = 0;
    try {
      for (const [i, uploadId] of uploadIds.entries()) {
        await start[i]();
        await untilState(uploadId, (state) => state === "reading" || state === "done", worker);
        const beganMs = performance.now();
        await untilState(uploadId, (state) => state === "done", worker);
        readingMs = Math.max(readingMs, performance.now() - beganMs);
      }
      const undisturbed = await resultChecksums(job.db);
      expect(undisturbed.traversals.rows).toBe(800 * FILES);
      await worker.stop();
      await forgetResults(job.db);

      const random = seededRandom(KILLS);
      let interrupted = 0;
      for (const [i, uploadId] of uploadIds.entries()) {
        await start[i]();
        for (let kill = i; kill < KILLS; kill += FILES) {
          worker = await startWorkerProcess(place);
          await untilState(uploadId, (state) => state === "reading" || state === "done", worker);
          await delay(((kill + random()) / KILLS) * readingMs);
          await worker.kill();
          if ((await stateOf(uploadId)) === "reading") interrupted += 1;
          await afterDeath();
        }
        worker = await startWorkerProcess(place);
        await untilState(uploadId, (state) => state === "done", worker);
        await worker.stop();
      }
      expect(interrupted).toBeGreaterThan(0);
      expect(await resultChecksums(job.db)).toEqual(undisturbed);
      // Each file of pings, the list of its three rejected rows.
      const kept = (await readdir(join(place.dataDir, "storage/uploads"))).filter((name) => !name.endsWith(".part"));
      expect(kept.filter((name) => uploadIds.some((id) => name.startsWith(id))).sort()).toEqual(uploadIds.flatMap((id) => [id, `${id}-rejected.csv`]).sort());
    } finally {
      await worker.kill();
    }
  });
});
