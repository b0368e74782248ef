import { Readable } from "node:stream";
import { count, eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { auditEvents, junctions, legs, movements, traversals } from "@/db/schema";
import { ScreenQuery } from "@/domain/screen";
import type { UploadKind } from "@/domain/upload";
import { reprocessLegs as reprocessJob } from "@/jobs/definitions/reprocess-legs";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { reprocessLegs } from "@/services/ingest/reprocess-legs";
import { editLeg } from "@/services/legs/edit-leg";
import { getLegCheck } from "@/services/legs/get-leg-check";
import { listLegsToCheck } from "@/services/legs/list-legs-to-check";
import { addLeg, mergeLegs } from "@/services/legs/redraw-legs";
import { getJunction } from "@/services/junctions/get-junction";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;
let junctionId: number;

async function upload(kind: UploadKind, name: string, content: string): Promise<void> {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
  await ingestUpload(job, { uploadId });
}

const legRows = () => job.db.select().from(legs).orderBy(legs.bearingDeg, legs.id);

async function perLeg(): Promise<Map<number, number>> {
  const rows = await job.db.select({ legId: traversals.legId, n: count() }).from(traversals).groupBy(traversals.legId);
  return new Map(rows.map((row) => [row.legId, row.n]));
}

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
  await upload("junctions", "junctions.csv", JUNCTIONS_CSV);
  await upload("pings", "monday.csv", crossingPings());
  [{ id: junctionId }] = await job.db.select({ id: junctions.id }).from(junctions);
});

describe("leg check", () => {
  it("shows one junction's legs, turns and exits, and says when its pings are being matched anew", async () => {
    const check = await getLegCheck(engineer, { junctionId });
    expect(check).toMatchObject({ junction: { code: "X1" }, rematch: null });
    expect(check.legs).toHaveLength(4);
    expect(check.legs[0]).toMatchObject({ locked: false, origin: "derived", speedLimitMs: null, lanes: null });
    for (const leg of check.legs) expect(check.movements.filter((movement) => movement.legId === leg.id).length).toBeGreaterThan(0);
    expect(check.exits.length).toBeGreaterThanOrEqual(4);
    await job.queue.enqueue(reprocessJob, { junctionIds: [junctionId] });
    expect((await getLegCheck(engineer, { junctionId })).rematch).toBe("waiting");
    await job.db.execute(sql`update pgboss.job set state = 'active', started_on = now() where name = 'reprocess-legs'`);
    expect((await getLegCheck(engineer, { junctionId })).rematch).toBe("running");
    await job.db.execute(sql`update pgboss.job set state = 'failed' where name = 'reprocess-legs'`);
    expect((await getLegCheck(engineer, { junctionId })).rematch).toBe("failed");
    await job.db.execute(sql`delete from pgboss.job where name = 'reprocess-legs'`);
    await expect(getLegCheck(engineer, { junctionId: "none" })).rejects.toThrow("Junction none does not exist");
  });

  it("lists every leg with the sentences that make it doubtful", async () => {
    const list = await listLegsToCheck(engineer);
    expect(list).toHaveLength(4);
    expect(list[0].doubts.length).toBeGreaterThanOrEqual(list[3].doubts.length);
  });

  it("matching anew without a change gives the same traversals and delay", async () => {
    const before = { perLeg: await perLeg(), view: await getJunction(engineer, { junctionId, when: ScreenQuery.parse({ period: "all" }) }) };
    await reprocessLegs(job, { junctionIds: [junctionId] });
    expect(await perLeg()).toEqual(before.perLeg);
    const after = await getJunction(engineer, { junctionId, when: ScreenQuery.parse({ period: "all" }) });
    expect(after.score?.vehicles).toBe(before.view.score?.vehicles);
    expect(after.score?.delay?.value).toBeCloseTo(before.view.score?.delay?.value ?? NaN, 3);
  });

  it("keeps a leg's new name and limits through the next upload", async () => {
    const [leg] = await legRows();
    await editLeg(engineer, { legId: leg.id, name: "Mill Lane inbound", speedLimitKmh: 50, storageM: 120 });
    await reprocessLegs(job, { junctionIds: [junctionId] });
    await upload("pings", "tuesday.csv", crossingPings({ startMs: Date.parse("2026-03-04T08:00:00Z") }));
    const [kept] = await job.db.select().from(legs).where(eq(legs.id, leg.id));
    expect(kept).toMatchObject({ name: "Mill Lane inbound", storageM: 120, locked: true, doubts: [] });
    expect(kept.speedLimitMs).toBeCloseTo(50 / 3.6, 4);
  });

  it("moves a stop line and shortens the storage by as much", async () => {
    const [, leg] = await legRows();
    await editLeg(engineer, { legId: leg.id, storageM: 100, stopLineShiftM: 8 });
    const [moved] = await job.db.select().from(legs).where(eq(legs.id, leg.id));
    expect(Math.hypot(moved.line[0] - leg.line[0], moved.line[1] - leg.line[1])).toBeCloseTo(8, 2);
    expect(Math.hypot(moved.line[0], moved.line[1])).toBeGreaterThan(Math.hypot(leg.line[0], leg.line[1]));
    expect(moved).toMatchObject({ storageM: 92, stopLineOrigin: "set" });
    await expect(editLeg(engineer, { legId: leg.id, stopLineShiftM: 61 })).rejects.toThrow();
  });

  it("merges two legs: the dropped one stays away, its traversals go", async () => {
    const rows = await legRows();
    const added = await addLeg(engineer, { junctionId, name: "Side lane", line: [[14, 14], [90, 90]] });
    expect(await legRows()).toHaveLength(rows.length + 1);
    await mergeLegs(engineer, { keepId: rows[0].id, dropId: added.legId });
    await mergeLegs(engineer, { keepId: rows[0].id, dropId: rows[3].id });
    await reprocessLegs(job, { junctionIds: [junctionId] });
    expect((await legRows()).map((leg) => leg.id)).toEqual(rows.slice(0, 3).map((leg) => leg.id));
    expect((await perLeg()).has(rows[3].id)).toBe(false);
    expect(await job.db.select({ n: count() }).from(movements).where(eq(movements.legId, rows[3].id))).toEqual([{ n: 0 }]);
    await upload("pings", "wednesday.csv", crossingPings({ startMs: Date.parse("2026-03-05T08:00:00Z") }));
    expect(await legRows()).toHaveLength(3);
  });

  it("writes each change into the audit trail", async () => {
    const actions = (await job.db.select({ action: auditEvents.action }).from(auditEvents)).map((row) => row.action);
    expect(actions).toEqual(expect.arrayContaining(["changed leg", "added leg", "merged legs"]));
  });

  it("is for engineers", async () => {
    const [leg] = await legRows();
    for (const role of ["technician", "reader", "admin", "nobody"] as const) {
      await expect(editLeg(await testContext(role), { legId: leg.id, name: "x" })).rejects.toThrow();
    }
  });
});
