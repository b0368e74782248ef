import { Readable } from "node:stream";
import { eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { junctions, legs, movements, traversals } from "@/db/schema";
import type { UploadKind } from "@/domain/upload";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { reprocessLegs } from "@/services/ingest/reprocess-legs";
import { editLeg } from "@/services/legs/edit-leg";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;

async function upload(kind: UploadKind, name: string, content: string): Promise<void> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
  await ingestUpload(job, { uploadId });
}

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
  await upload("junctions", "junctions.csv", JUNCTIONS_CSV);
  await upload("pings", "monday.csv", crossingPings({ vehicles: 320 }));
  // Files are matched in the order in which they came.
  engineer = { ...engineer, now: new Date(engineer.now.getTime() + 60_000) };
  await upload("pings", "tuesday.csv", crossingPings({ startMs: Date.parse("2026-03-04T08:00:00Z"), vehicles: 80 }));
});

describe("matching anew after a leg was changed", () => {
  it("measures the days of all files by one yardstick", async () => {
    const [{ id: junctionId }] = await job.db.select({ id: junctions.id }).from(junctions);
    const [leg] = await job.db.select().from(legs).orderBy(legs.id);
    await editLeg(engineer, { legId: leg.id, stopLineShiftM: 2 });
    await reprocessLegs(job, { junctionIds: [junctionId] });
    const referenceS = sql<number>`extract(epoch from ${traversals.exitAt} - ${traversals.enterAt}) - ${traversals.delayS}`;
    const spans = await job.db
      .select({ uploads: sql<number>`count(distinct ${traversals.uploadId})`.mapWith(Number), spreadS: sql<number>`max(${referenceS}) - min(${referenceS})`.mapWith(Number) })
      .from(traversals)
      .groupBy(traversals.movementId);
    expect(spans.length).toBe(4);
    for (const { uploads, spreadS } of spans) {
      expect(uploads).toBe(2);
      expect(spreadS).toBeLessThan(0.01);
    }
    // Of 80 and of 20 vehicles on the leg every second one drives through: neither file alone has more than 40.
    const [movement] = await job.db.select({ n: movements.referenceN }).from(movements).where(eq(movements.legId, leg.id)).orderBy(sql`${movements.referenceN} desc`);
    expect(movement.n).toBeGreaterThan(40);
  });
});
