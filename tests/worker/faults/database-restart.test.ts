import { chmodSync, mkdtempSync, rmSync } from "node:fs";
import { readdir } from "node:fs/promises";
import { join } from "node:path";
import { Readable } from "node:stream";
import { setTimeout as delay } from "node:timers/promises";
import { sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { openDatabase, type Database } from "@/db/client";
import type { UploadKind } from "@/domain/upload";
import { openQueue } from "@/jobs/queue";
import { migrateDatabase } from "@/ops/migrate-database";
import { ensurePostgres } from "@/ops/setup/postgres-binaries.mjs";
import { serverAccount } from "@/ops/setup/postgres-place.mjs";
import { startPostgres } from "@/ops/setup/postgres-server.mjs";
import { run } from "@/ops/setup/run.mjs";
import type { Context } from "@/services/context";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { openFolderStorage } from "@/storage/folder-storage";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { forgetResults, resultChecksums } from "@tests/support/result-checksums";
import { startWorkerProcess } from "@tests/support/worker-process";

/** Enough for a reading that takes longer than the order to restart. */
const VEHICLES = 3000;
/** Of some 200,000 rows: two workers share them. */
const PIECE_ROWS = 20_000;

let home: string;
let server: { url: string; stop: () => Promise<void> };
let database: Database;
let ctx: Context;

/** Every connection is cut and every transaction lost, as when the server is killed; it comes up again by its log. */
async function restartServer(): Promise<void> {
  const pgCtl = join(await ensurePostgres(undefined), "pg_ctl");
  const data = join(home, "postgres");
  await run(pgCtl, ["restart", "-D", data, "-m", "immediate", "-l", join(data, "server.log"), "-w"], { ...serverAccount(), cwd: "/" });
}

async function receive(kind: UploadKind, name: string, content: string) {
  const { uploadId, detected } = await receiveUpload(ctx, { kind, name }, Readable.from([Buffer.from(content)]));
  return { uploadId, start: () => startUpload(ctx, { uploadId, mapping: detected.mapping, supplier: null }) };
}

const stateOf = async (uploadId: string) => (await database.db.execute<{ state: string }>(sql`select state from uploads where id = ${uploadId}`)).rows[0].state;

async function untilState(uploadId: string, wanted: string[]): Promise<void> {
  await vi.waitUntil(
    async () => {
      // What a job waits for after a failure, the test does not.
      await database.db.execute(sql`update pgboss.job set start_after = now() where state = 'retry' and start_after > now()`);
      return wanted.includes(await stateOf(uploadId));
    },
    { timeout: 45_000, interval: 15 },
  );
}

beforeAll(async () => {
  home = mkdtempSync(`/var/tmp/tailmark-test-${process.pid}-`);
  chmodSync(home, 0o711);
  server = await startPostgres({ wanted: join(home, "postgres"), password: "test", volatile: true });
  await migrateDatabase(server.url, "drizzle");
  database = openDatabase(server.url, { max: 4 });
  ctx = {
    actor: { type: "job", job: "test" },
    db: database.db,
    now: new Date("2026-03-10T12:00:00Z"),
    storage: openFolderStorage(join(home, "data/storage")),
    queue: openQueue(database.db),
    mailer: { send: async () => undefined, listKept: async () => [], close: () => undefined },
    baseUrl: "http://city.example",
  };
});

afterAll(async () => {
  await ctx.queue.stop();
  await database.close();
  await server.stop();
  rmSync(home, { recursive: true, force: true });
});

describe("a connection that is lost while somebody holds it between two queries", () => {
  it("fails the next query and nothing else", async () => {
    const other = openDatabase(server.url, { max: 2 });
    try {
      const held = await other.pool.connect();
      const { rows } = await held.query<{ pid: number }>("select pg_backend_pid() as pid");
      const lost = new Promise((resolve) => held.once("end", resolve));
      await other.pool.query("select pg_terminate_backend($1)", [rows[0].pid]);
      await lost;
      await expect(held.query("select 1")).rejects.toThrow("connection error");
      held.release(true);
      expect((await other.pool.query<{ n: number }>("select 1 as n")).rows).toEqual([{ n: 1 }]);
    } finally {
      await other.close();
    }
  });
});

describe("PostgreSQL that goes down and comes up again while a file is read", () => {
  it("leaves the tables as if it had not, with the same two workers going on", async () => {
    const junctions = await receive("junctions", "junctions.csv", JUNCTIONS_CSV);
    await junctions.start();
    await ingestUpload(ctx, { uploadId: junctions.uploadId });
    const file = await receive("pings", "day.csv", crossingPings({ vehicles: VEHICLES, everyS: 20, pingS: 1 }));
    await file.start();
    const beganMs = performance.now();
    await ingestUpload(ctx, { uploadId: file.uploadId });
    const readingMs = performance.now() - beganMs;
    const undisturbed = await resultChecksums(database.db);
    expect(undisturbed.traversals.rows).toBe(VEHICLES);
    await forgetResults(database.db);

    const place = { databaseUrl: server.url, dataDir: join(home, "data"), pieceRows: PIECE_ROWS };
    const workers = [await startWorkerProcess(place), await startWorkerProcess(place)];
    try {
      await file.start();
      await untilState(file.uploadId, ["reading"]);
      await delay(readingMs / 5);
      await restartServer();
      expect(await stateOf(file.uploadId), "the restart came in the middle").toBe("reading");
      await database.db.execute(sql`update pgboss.job set started_on = now() - interval '1 minute' where state = 'active'`);
      await untilState(file.uploadId, ["done", "failed"]);
      for (const worker of workers) expect(worker.hasEnded(), worker.output()).toBe(false);
      expect(await resultChecksums(database.db)).toEqual(undisturbed);

      const next = await receive("pings", "next.csv", crossingPings({ vehicles: 40, startMs: Date.parse("2026-03-04T08:00:00Z") }));
      await next.start();
      await untilState(next.uploadId, ["done"]);
      await vi.waitFor(async () => {
        expect((await database.db.execute(sql`select 1 from ingest_pieces`)).rows).toEqual([]);
        expect(await readdir(join(home, "data/storage/pieces"))).toEqual([]);
      }, 20_000);
    } finally {
      for (const worker of workers) await worker.kill();
    }
  });
});
