import { Readable } from "node:stream";
import { sql } from "drizzle-orm";
import { beforeEach, afterEach, describe, expect, it, vi } from "vitest";
import { prepareQueues } from "@/jobs/queue";
import { JOBS } from "@/jobs/definitions";
import type { UploadKind } from "@/domain/upload";
import { getUpload } from "@/services/uploads/get-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { ingestUploadHandler } from "@/worker/handlers/ingest-upload";
import { runJobs, type JobRunner } from "@/worker/run-jobs";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, testPlace, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;
let runner: JobRunner | undefined;

beforeEach(async () => {
  await prepareQueues((await testPlace()).url, JOBS);
  engineer = await testContext("engineer");
  job = await testContext("job");
});

afterEach(async () => {
  await runner?.stop();
  runner = undefined;
});

async function send(kind: UploadKind, content: string): Promise<string> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name: `${kind}.csv` }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
  return uploadId;
}

describe("a worker that is told to stop while it reads a file", () => {
  it("leaves the file waiting, on its last run too, and the next worker reads it in", async () => {
    await ingestUpload(job, { uploadId: await send("junctions", JUNCTIONS_CSV) });
    await job.db.execute(sql`delete from pgboss.job`);
    const uploadId = await send("pings", crossingPings());
    await job.db.execute(sql`update pgboss.job set state = 'retry', retry_count = retry_limit - 1, started_on = now()`);

    const { url, database } = await testPlace();
    let isReading = false;
    const held = { ...ingestUploadHandler, handle: async (...[ctx, payload, run]: Parameters<typeof ingestUploadHandler.handle>) => {
      isReading = true;
      await new Promise((resolve) => run.signal.addEventListener("abort", resolve));
      await ingestUploadHandler.handle(ctx, payload, run);
    } };
    runner = await runJobs({ databaseUrl: url, pool: database.pool, handlers: [held], concurrency: 1, contextFor: () => job });
    await vi.waitFor(() => expect(isReading).toBe(true), 10_000);
    await runner.stop();
    expect(await getUpload(engineer, { uploadId })).toMatchObject({ state: "waiting", failure: null });

    await job.db.execute(sql`update pgboss.job set start_after = now() where state = 'retry'`);
    runner = await runJobs({ databaseUrl: url, pool: database.pool, handlers: [ingestUploadHandler], concurrency: 1, contextFor: () => job });
    await vi.waitFor(async () => expect((await getUpload(engineer, { uploadId })).state).toBe("done"), 30_000);
  });
});
