import { and, eq, inArray, notInArray, sql } from "drizzle-orm";
import { redrawNetwork, type Redrawn } from "@/core/legs/redraw";
import type { GivenLeg } from "@/core/options";
import type { Network } from "@/core/types";
import { bulkTransaction, withAdvisoryLock } from "@/db/bulk-transaction";
import type { Db } from "@/db/client";
import { legs, uploads } from "@/db/schema";
import { AppError } from "@/domain/errors";
import type { FileMapping, IngestReport } from "@/domain/upload";
import { readLegs, type DrawnLeg, type LegsRead } from "@/formats/legs/read-legs";
import { reprocessLegs } from "@/jobs/definitions/reprocess-legs";
import { raiseDataVersion } from "../catalogue/catalogue";
import type { Context } from "../context";
import { noteLegEdit } from "../legs/leg-edits";
import { getSettings } from "../settings/get-settings";
import { failUpload, finishUpload } from "./finish-upload";
import { INGEST_LOCK, readJunctionPoints, readNetwork, storeNetwork, type KeyedPoint } from "./network-rows";
import { storeRejects } from "./rejects";

interface LegsUpload {
  id: string;
  storageKey: string;
  mapping: FileMapping;
}

/** Puts drawn lines in the places of the legs of their junctions; the pings around these are then matched anew. */
export async function ingestLegs(ctx: Context, upload: LegsUpload): Promise<void> {
  const points = await readJunctionPoints(ctx.db);
  if (points.length === 0) throw new AppError("invalid", "Load the city's junctions first: leg lines belong to them.");
  const read = await readLegs(await ctx.storage.open(upload.storageKey), upload.mapping, new Map(points.map((point) => [point.id, point])));
  const rejectsKey = await storeRejects(ctx, upload.id, read.rejectedRows);
  if (read.legs.length === 0) {
    const { rowsRead, accepted, rejected, samples } = read;
    return failUpload(ctx, upload.id, "No line of the file could be read as a leg; the report says why.", { rowsRead, accepted, rejected, samples }, rejectsKey);
  }
  await withAdvisoryLock(ctx.db, INGEST_LOCK, () => redraw(ctx, upload.id, points, read, rejectsKey));
}

async function redraw(ctx: Context, uploadId: string, points: KeyedPoint[], read: LegsRead, rejectsKey: string | null): Promise<void> {
  const { driveSide } = await getSettings(ctx);
  const hasPings = await holdsPings(ctx.db);
  const named = new Set(read.legs.map((leg) => leg.junctionId));
  const touched = points.filter((point) => named.has(point.id)).map((point) => point.key);
  const nothing: Network = { junctions: points.map(({ id, lat, lon }) => ({ id, lat, lon })), legs: [], exits: [], movements: [], driveSide };
  await bulkTransaction(ctx.db, async (tx) => {
    // Changes by hand wait until the lines are in.
    await noteLegEdit(tx);
    const known = (await readNetwork(tx, points, driveSide)) ?? nothing;
    const redrawn = redrawNetwork(known, read.legs.map(givenLeg));
    await storeNetwork(tx, redrawn.network, points.map((point) => point.key));
    await dropReplaced(tx, touched, redrawn);
    await storeLanes(tx, read.legs, redrawn);
    await finishUpload({ ...ctx, db: tx }, uploadId, reportOf(read, known, redrawn, named), rejectsKey);
    await raiseDataVersion(tx);
    if (hasPings) await ctx.queue.enqueue(reprocessLegs, { junctionIds: touched }, { db: tx });
  });
}

function givenLeg(leg: DrawnLeg): GivenLeg {
  const { junctionId, lat, lon } = leg;
  return { junctionId, lat, lon, name: leg.name ?? undefined, speedLimitMs: leg.speedLimitKmh === null ? NaN : leg.speedLimitKmh / 3.6, storageM: leg.storageM ?? NaN };
}

async function holdsPings(db: Db): Promise<boolean> {
  const rows = await db.select({ id: uploads.id }).from(uploads).where(and(eq(uploads.kind, "pings"), eq(uploads.state, "done"))).limit(1);
  return rows.length > 0;
}

/** Their traversals lead nowhere until the pings are matched anew, as after a merge. */
async function dropReplaced(db: Db, touched: number[], { network }: Redrawn): Promise<void> {
  await db.delete(legs).where(and(inArray(legs.junctionId, touched), notInArray(legs.code, network.legs.map((leg) => leg.id))));
}

async function storeLanes(db: Db, drawn: readonly DrawnLeg[], { legIds }: Redrawn): Promise<void> {
  const given = drawn.flatMap(({ lanes }, i) => (lanes === null || legIds[i] === null ? [] : [{ code: legIds[i], lanes }]));
  if (given.length === 0) return;
  await db.execute(
    sql`update legs set lanes = given.lanes from json_to_recordset(${JSON.stringify(given)}::json) as given(code text, lanes int) where legs.code = given.code`,
  );
}

function reportOf(read: LegsRead, known: Network, { network, legIds }: Redrawn, named: ReadonlySet<string>): IngestReport {
  const { rowsRead, accepted, rejected, samples } = read;
  const now = new Set(network.legs.map((leg) => leg.id));
  const drawn = new Set(legIds.filter((id) => id !== null));
  const atNamed = known.legs.filter((leg) => named.has(known.junctions[leg.junction].id));
  const kept = legIds.length - drawn.size;
  const aboutLocked = kept === 0 ? [] : [`${kept === 1 ? "1 line lies" : `${kept} lines lie`} on a locked leg, which was kept as it is.`];
  return {
    rowsRead,
    accepted,
    rejected,
    samples,
    remarks: [...read.remarks, ...aboutLocked],
    legsDrawn: drawn.size,
    legsReplaced: atNamed.filter((leg) => drawn.has(leg.id) || !now.has(leg.id)).length,
    junctionsTouched: named.size,
  };
}
