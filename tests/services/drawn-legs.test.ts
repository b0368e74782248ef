import { Readable } from "node:stream";
import { count, eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { legs, traversals } from "@/db/schema";
import type { UploadKind } from "@/domain/upload";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { reprocessLegs } from "@/services/ingest/reprocess-legs";
import { editLeg } from "@/services/legs/edit-leg";
import { getUpload } from "@/services/uploads/get-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { CROSSING, crossingPings, JUNCTIONS_CSV } from "@tests/support/crossing";
import { testContext, type TestContext } from "@tests/support/database";

let engineer: TestContext;
let job: TestContext;

async function upload(kind: UploadKind, name: string, content: string) {
  const { uploadId, detected } = await receiveUpload(engineer, { kind, name }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
  await ingestUpload(job, { uploadId });
  return getUpload(engineer, { uploadId });
}

interface Line {
  /** Direction of travel, degrees. */
  bearing: 0 | 90 | 180 | 270;
  properties?: object;
}

/** Straight lines of 300 m that end 20 m before the crossing. */
function legsFile(...lines: Line[]): string {
  const features = lines.map(({ bearing, properties }) => {
    const [east, north] = [[0, -1], [-1, 0], [0, 1], [1, 0]][bearing / 90];
    const at = (m: number) => [CROSSING.lon + (east * m) / 78_010.7, CROSSING.lat + (north * m) / 111_143.5];
    return { type: "Feature", properties: { junction_id: CROSSING.id, ...properties }, geometry: { type: "LineString", coordinates: [at(320), at(20)] } };
  });
  return JSON.stringify({ type: "FeatureCollection", features });
}

const legRows = () => job.db.select().from(legs).orderBy(legs.bearingDeg, legs.id);

async function perLeg(): Promise<Map<number, number>> {
  const rows = await job.db.select({ legId: traversals.legId, n: count() }).from(traversals).groupBy(traversals.legId);
  return new Map(rows.map((row) => [row.legId, row.n]));
}

async function queued(): Promise<number[][]> {
  const { rows } = await job.db.execute<{ data: { junctionIds: number[] } }>(sql`select data from pgboss.job where name = 'reprocess-legs' order by created_on`);
  return rows.map((row) => row.data.junctionIds);
}

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
});

describe("drawn leg lines", () => {
  it("wait for the city's junctions", async () => {
    expect(await upload("legs", "legs.geojson", legsFile({ bearing: 0 }))).toMatchObject({ state: "failed", failure: expect.stringContaining("junctions first") });
  });

  it("take the places of derived legs, which keep their identity, and have the pings matched anew", async () => {
    await upload("junctions", "junctions.csv", JUNCTIONS_CSV);
    await upload("pings", "monday.csv", crossingPings());
    const derived = await legRows();
    expect(derived).toHaveLength(4);
    const before = await perLeg();

    const west = { name: "Mill Lane inbound", speed_limit_kmh: 50, storage_m: 110, lanes: 2 };
    const { report, state } = await upload("legs", "legs.geojson", legsFile({ bearing: 0 }, { bearing: 90, properties: west }, { bearing: 180 }));
    expect(state).toBe("done");
    expect(report).toMatchObject({ accepted: 3, legsDrawn: 3, legsReplaced: 4, junctionsTouched: 1, rejected: {} });

    const drawn = await legRows();
    expect(drawn.map((leg) => leg.id)).toEqual(derived.slice(0, 3).map((leg) => leg.id));
    expect(drawn[1]).toMatchObject({ name: "Mill Lane inbound", origin: "given", stopLineOrigin: "given", storageM: 110, lanes: 2, locked: false });
    expect(drawn[1].speedLimitMs).toBeCloseTo(50 / 3.6, 4);
    // The line ends 20 m before the junction's point.
    expect(Math.hypot(drawn[1].line[0], drawn[1].line[1])).toBeCloseTo(20, 1);

    const junctionId = drawn[0].junctionId;
    expect(await queued()).toEqual([[junctionId]]);
    await reprocessLegs(job, { junctionIds: [junctionId] });
    const after = await perLeg();
    for (const leg of drawn) expect(after.get(leg.id)).toBe(before.get(leg.id));
    expect(after.has(derived[3].id)).toBe(false);
  });

  it("survive the next file of pings", async () => {
    const before = await legRows();
    await upload("pings", "tuesday.csv", crossingPings({ startMs: Date.parse("2026-03-04T08:00:00Z") }));
    const after = await legRows();
    expect(after.map(({ id, name, line, origin, lanes }) => ({ id, name, line, origin, lanes }))).toEqual(before.map(({ id, name, line, origin, lanes }) => ({ id, name, line, origin, lanes })));
  });

  it("leave a locked leg as it is, and say so; a second file replaces the rest", async () => {
    const [south, west] = await legRows();
    await editLeg(engineer, { legId: west.id, name: "Kept by hand" });
    const { report } = await upload("legs", "again.geojson", legsFile({ bearing: 0, properties: { name: "Long Road north" } }, { bearing: 90, properties: { name: "Other" } }, { bearing: 270 }));
    expect(report).toMatchObject({ legsDrawn: 2, remarks: ["1 line lies on a locked leg, which was kept as it is."] });
    const now = await legRows();
    expect(now.map(({ name }) => name)).toEqual(["Long Road north", "Kept by hand", expect.stringContaining("westbound")]);
    expect(now[0]).toMatchObject({ id: south.id });
    const [kept] = await job.db.select().from(legs).where(eq(legs.id, west.id));
    expect(kept).toMatchObject({ locked: true, lanes: 2, line: west.line });
  });

  it("of unknown junctions are rejected with line and reason; a file of nothing else fails", async () => {
    const foreign = legsFile({ bearing: 0, properties: { junction_id: "X9" } });
    const failed = await upload("legs", "foreign.geojson", foreign);
    expect(failed).toMatchObject({ state: "failed", hasRejects: true, report: { accepted: 0, rejected: { junction: 1 } } });
    expect(failed.report?.samples[0]).toMatchObject({ line: 1, reason: "junction" });
  });
});
