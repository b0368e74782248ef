import { readdir, readFile } from "node:fs/promises";
import { join } from "node:path";
import { Readable } from "node:stream";
import { sql } from "drizzle-orm";
import { beforeAll, beforeEach, describe, expect, it } from "vitest";
import { junctions, legs } from "@/db/schema";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { reprocessLegs } from "@/services/ingest/reprocess-legs";
import { editLeg } from "@/services/legs/edit-leg";
import { getUpload } from "@/services/uploads/get-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { crossingPings } from "@tests/support/crossing";
import { readCrossing } from "@tests/support/crossing-city";
import { testContext, testPlace, type TestContext } from "@tests/support/database";
import { forgetResults } from "@tests/support/result-checksums";

let engineer: TestContext;
let job: TestContext;

const START_MS = Date.parse("2026-03-03T08:00:00Z");
const VEHICLES = 240;
const [HEADER, ...ROWS] = crossingPings({ vehicles: VEHICLES, startMs: START_MS, everyS: 12 }).trim().split("\n");

/** A vehicle sets out every 12 s and is on its way for a minute or more: some five of them are cut in two. */
const CUT_MS = START_MS + 20 * 60_000;
const before = ROWS.filter((row) => Number(row.split(",")[1]) < CUT_MS);
const after = ROWS.filter((row) => Number(row.split(",")[1]) >= CUT_MS);

let files = 0;

async function read(rows: string[], supplier: string | null): Promise<string> {
  const content = [HEADER, ...rows].join("\n");
  const { uploadId, detected } = await receiveUpload(engineer, { kind: "pings", name: `part-${files++}.csv` }, Readable.from([Buffer.from(content)]));
  await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier });
  await ingestUpload(job, { uploadId });
  return uploadId;
}

/** What every stop line saw, in order of time: vehicles are told by their keyed hashes. */
async function passages(): Promise<string[]> {
  const { rows } = await job.db.execute<{ passage: string }>(
    sql`select concat(vehicle, ' ', movement_id, ' ', extract(epoch from stop_line_at)::numeric(12, 1)) as passage from traversals order by passage`,
  );
  return rows.map((row) => row.passage);
}

const vehiclesOf = (seen: string[]) => new Set(seen.map((passage) => passage.split(" ")[0])).size;

beforeAll(async () => {
  engineer = await testContext("engineer");
  job = await testContext("job");
  await readCrossing(engineer, job);
});

beforeEach(() => forgetResults(job.db));

describe("a supplier's files that adjoin", () => {
  it.each([
    ["in the order of time", [before, after]],
    ["the other way round", [after, before]],
  ])("give every vehicle once, %s", async (_, [one, other]) => {
    await read(one, "Harbour Taxis");
    const second = await read(other, "Harbour Taxis");
    const seen = await passages();
    expect(seen).toHaveLength(VEHICLES);
    expect(vehiclesOf(seen)).toBe(VEHICLES);
    const which = one === before ? "last" : "first";
    expect((await getUpload(engineer, { uploadId: second })).report?.remarks).toEqual([
      `Read together with the ${which} half hour of part-${files - 2}.csv, so that trips over the seam are whole.`,
    ]);
  });

  it("stay whole when a leg is changed and they are matched anew", async () => {
    await read(before, "Harbour Taxis");
    await read(after, "Harbour Taxis");
    const [leg] = await job.db.select().from(legs).orderBy(legs.id);
    const [{ id: junctionId }] = await job.db.select({ id: junctions.id }).from(junctions);
    await editLeg(engineer, { legId: leg.id, stopLineShiftM: 2 });
    await reprocessLegs(job, { junctionIds: [junctionId] });
    expect(vehiclesOf(await passages())).toBe(VEHICLES);
    expect(await passages()).toHaveLength(VEHICLES);
  });

  it("are not joined where nobody says that the vehicles are the same, or time lies between", async () => {
    await read(before, null);
    await read(after, null);
    const missing = VEHICLES - (await passages()).length;
    // On their way for 60 s, or 90 s with the wait, of which the window takes some 25 to 55 s; one every 12 s.
    expect(missing).toBeGreaterThanOrEqual(2);
    expect(missing).toBeLessThanOrEqual(8);
    await forgetResults(job.db);
    await read(before, "Harbour Taxis");
    const later = await read(ROWS.filter((row) => Number(row.split(",")[1]) >= CUT_MS + 200_000), "Harbour Taxis");
    expect((await getUpload(engineer, { uploadId: later })).report?.remarks).toBeUndefined();
  });

  it("keep no identifier of a vehicle beside them", async () => {
    const uploadId = await read(before.map((row) => `harbour-cab-${row}`), "Harbour Taxis");
    const edges = join((await testPlace()).folder, "edges", uploadId);
    const names = (await readdir(edges)).sort();
    expect(names).toEqual(["first", "first-0", "last", "last-0"]);
    for (const name of names) expect((await readFile(join(edges, name))).includes("harbour")).toBe(false);
  });
});
