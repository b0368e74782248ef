import { Readable } from "node:stream";
import { count, eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { auditEvents, exits, junctions, legs, movements, traversals } from "@/db/schema";
import { ScreenQuery } from "@/domain/screen";
import type { UploadKind } from "@/domain/upload";
import { reprocessLegs as reprocessJob } from "@/jobs/definitions/reprocess-legs";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { reprocessLegs } from "@/services/ingest/reprocess-legs";
import { editLeg } from "@/services/legs/edit-leg";
import { getLegCheck } from "@/services/legs/get-leg-check";
import { listLegsToCheck } from "@/services/legs/list-legs-to-check";
import { addLeg, mergeLegs, splitLeg } from "@/services/legs/redraw-legs";
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

  it("gives an emptied storage back to the street between the junctions, where there is one behind", async () => {
    const [, leg] = await legRows();
    await editLeg(engineer, { legId: leg.id, storageM: null });
    const storageOf = async () => (await job.db.select().from(legs).where(eq(legs.id, leg.id)))[0].storageM;
    expect(await storageOf()).toBeNull();
    const [exit] = await job.db.select({ id: exits.id }).from(exits);
    await job.db.update(legs).set({ upstreamExitId: exit.id, line: [0, 10, 0, 100, 30, 140] }).where(eq(legs.id, leg.id));
    await editLeg(engineer, { legId: leg.id, storageM: null });
    // 90 m, then the long side of a triangle of 30 and 40 m.
    expect(await storageOf()).toBeCloseTo(140, 3);
    await job.db.update(legs).set({ upstreamExitId: null, line: leg.line, storageM: leg.storageM }).where(eq(legs.id, leg.id));
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

  it("refuses drawn lines that are no leg: too short, far off, or drawn towards the junction", async () => {
    const add = (line: [number, number][]) => addLeg(engineer, { junctionId, name: "Wrong", line });
    await expect(add([[0, 15], [0, 40]])).rejects.toThrow("The line is 25 m long: a leg needs at least 30 m");
    await expect(add([[0, 200], [0, 300]])).rejects.toThrow("begins 200 m from the junction");
    await expect(add([[0, 100], [0, 15]])).rejects.toThrow("draw it from the stop line upstream");
    expect((await legRows()).some((leg) => leg.name === "Wrong")).toBe(false);
  });

  it("splits a leg: the first line keeps its identity, both stay", async () => {
    const [first] = await legRows();
    const { legId } = await splitLeg(engineer, { legId: first.id, first: [[2, -16], [2, -200]], second: [[12, -16], [80, -180]] });
    const rows = await legRows();
    const [kept, added] = [rows.find((leg) => leg.id === first.id), rows.find((leg) => leg.id === legId)];
    expect(kept).toMatchObject({ name: first.name, origin: "set", locked: true });
    // From (80, -180) to (12, -16): 68 m west and 164 m north, 22.5 degrees west of north.
    expect(added?.bearingDeg).toBeCloseTo(337.5, 0);
    await reprocessLegs(job, { junctionIds: [junctionId] });
    expect((await legRows()).map((leg) => leg.id)).toContain(legId);
    await mergeLegs(engineer, { keepId: first.id, dropId: legId });
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
