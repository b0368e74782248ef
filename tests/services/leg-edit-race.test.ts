import { Readable } from "node:stream";
import { count, eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it, vi } from "vitest";
import { bulkTransaction } from "@/db/bulk-transaction";
import { legs, traversals } from "@/db/schema";
import type { UploadKind } from "@/domain/upload";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { reprocessLegs } from "@/services/ingest/reprocess-legs";
import { noteLegEdit } from "@/services/legs/leg-edits";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;

async function start(kind: UploadKind, name: string, content: string): Promise<string> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
  return uploadId;
}

async function isSomeoneWaiting(): Promise<boolean> {
  const { rows } = await job.db.execute<{ n: number }>(sql`select count(*)::int as n from pg_stat_activity where datname = current_database() and wait_event_type = 'Lock' and wait_event <> 'advisory'`);
  return rows[0].n > 0;
}

/** Lets the work run up to where it wants to store, changes a leg's name and storage just then, and lets it go on. */
async function changeDuring(legId: number, name: string, work: () => Promise<void>): Promise<void> {
  let running: Promise<void> | undefined;
  await bulkTransaction(job.db, async (tx) => {
    await noteLegEdit(tx);
    await tx.update(legs).set({ name, storageM: 77, locked: true }).where(eq(legs.id, legId));
    running = work();
    await vi.waitFor(async () => expect(await isSomeoneWaiting()).toBe(true), 20_000);
  });
  await running;
}

const traversalsOf = async (uploadId: string) => (await job.db.select({ n: count() }).from(traversals).where(eq(traversals.uploadId, uploadId)))[0].n;

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
  await ingestUpload(job, { uploadId: await start("junctions", "junctions.csv", JUNCTIONS_CSV) });
  await ingestUpload(job, { uploadId: await start("pings", "monday.csv", crossingPings()) });
});

describe("a leg that is changed while pings are matched to it", () => {
  it("keeps the change when a file comes in; the file is matched to the changed leg", async () => {
    const [leg] = await job.db.select().from(legs).orderBy(legs.id);
    const uploadId = await start("pings", "tuesday.csv", crossingPings({ startMs: Date.parse("2026-03-04T08:00:00Z") }));
    await changeDuring(leg.id, "Changed while a file came in", () => ingestUpload(job, { uploadId }));
    const [now] = await job.db.select().from(legs).where(eq(legs.id, leg.id));
    expect(now).toMatchObject({ name: "Changed while a file came in", storageM: 77, locked: true });
    expect(await traversalsOf(uploadId)).toBe(240);
  });

  it("keeps the change when a junction is matched anew; that begins again afterwards", async () => {
    const [leg] = await job.db.select().from(legs).orderBy(legs.id);
    await job.db.execute(sql`delete from pgboss.job where name = 'reprocess-legs'`);
    await changeDuring(leg.id, "Changed while matching", () => reprocessLegs(job, { junctionIds: [leg.junctionId] }));
    const [now] = await job.db.select().from(legs).where(eq(legs.id, leg.id));
    expect(now).toMatchObject({ name: "Changed while matching", storageM: 77 });
    const { rows } = await job.db.execute<{ data: unknown }>(sql`select data from pgboss.job where name = 'reprocess-legs' and state = 'created'`);
    expect(rows).toEqual([{ data: { junctionIds: [leg.junctionId] } }]);
  });
});
