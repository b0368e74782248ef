import { and, eq, inArray, notInArray, or } from "drizzle-orm";
import { relistMovements } from "@/core/legs/relist";
import { METHOD_VERSION } from "@/core/method-version";
import { keepInScreenDay } from "@/core/scores/leave-out";
import { mergeScreenDays } from "@/core/scores/merge-screen-days";
import { decodeScreenDay, encodeScreenDay } from "@/core/scores/screen-day-codec";
import type { ScreenDay } from "@/core/scores/types";
import { setReferencesFrom } from "@/core/traversals/references";
import { settleReferences } from "@/core/traversals/settled";
import type { Network } from "@/core/types";
import { bulkTransaction, withAdvisoryLock } from "@/db/bulk-transaction";
import type { Db } from "@/db/client";
import { screenDays, traversals as traversalTable } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { reprocessLegs as reprocessJob } from "@/jobs/definitions/reprocess-legs";
import { raiseDataVersion } from "../catalogue/catalogue";
import type { Context } from "../context";
import { legEdits, LegsChanged, requireSameLegs } from "../legs/leg-edits";
import { getSettings } from "../settings/get-settings";
import { pingsAlong } from "./edges";
import { matchFile } from "./match-file";
import { INGEST_LOCK, readJunctionPoints, readNetwork, storeNetwork, type KeyedPoint, type NetworkKeys } from "./network-rows";
import { pingFiles } from "./ping-files";
import { withRun, type Run } from "./pieces/run";
import { isLarge, readFile, type PingUpload } from "./read-file";
import { rowsOf, scoreQueues, slicesOf, tallyFile, type FileTallied } from "./score-file";
import type { Span } from "./steps/cut-time";
import type { DaySlice, Scene } from "./steps/tally-legs";
import { copyTraversals, makePartitions } from "./store-traversals";

interface Job {
  /** Changes of legs by hand when the network was read. */
  legEdits: number;
  network: Network;
  keys: NetworkKeys;
  /** Indices of the junctions whose legs were changed. */
  home: ReadonlySet<number>;
  /** 1 for each leg that the change touches: the junction's own and those that it feeds. */
  touched: Uint8Array;
  /** Around which pings are looked at. */
  near: readonly KeyedPoint[];
  timeZone: string;
}

/**
 * Matches the stored pings around some junctions anew, file by file; figures elsewhere stay as they are. Safe to run twice.
 * Where somebody changes a leg in the meantime, the work is queued again from its beginning.
 */
export async function reprocessLegs(ctx: Context, input: { junctionIds: number[] }, run?: { signal: AbortSignal }): Promise<void> {
  if (ctx.actor.type !== "job") throw new AppError("forbidden", "Legs are matched anew by the worker only.");
  try {
    await withAdvisoryLock(ctx.db, INGEST_LOCK, () => rematchFiles(ctx, input.junctionIds, run?.signal));
  } catch (error) {
    if (!(error instanceof LegsChanged)) throw error;
    await ctx.queue.enqueue(reprocessJob, { junctionIds: input.junctionIds });
  }
}

async function rematchFiles(ctx: Context, junctionIds: number[], signal: AbortSignal | undefined): Promise<void> {
  const job = await prepare(ctx, junctionIds);
  if (!job) return;
  let isFirst = true;
  for (const file of await pingFiles(ctx.db)) {
    signal?.throwIfAborted();
    if (await rematchUpload(ctx, file, job, isFirst, signal)) isFirst = false;
  }
  await bulkTransaction(ctx.db, async (tx) => {
    await requireSameLegs(tx, job.legEdits);
    const points = await readJunctionPoints(tx);
    await storeNetwork(tx, job.network, points.map((point) => point.key));
    await raiseDataVersion(tx);
  });
}

async function prepare(ctx: Context, junctionIds: number[]): Promise<Job | null> {
  const { driveSide, timeZone } = await getSettings(ctx);
  const seen = await legEdits(ctx.db);
  const points = await readJunctionPoints(ctx.db);
  const stored = await readNetwork(ctx.db, points, driveSide);
  const wanted = new Set(junctionIds);
  const home = new Set(points.flatMap((point, i) => (wanted.has(point.key) ? [i] : [])));
  if (!stored || home.size === 0) return null;
  const network = relistMovements(stored);
  const touched = Uint8Array.from(network.legs, (leg) =>
    home.has(leg.junction) || (leg.upstreamExit >= 0 && home.has(network.exits[leg.upstreamExit].junction)) ? 1 : 0,
  );
  const near = new Set(home);
  network.legs.forEach((leg, l) => touched[l] && near.add(leg.junction));
  const keys = await bulkTransaction(ctx.db, async (tx) => {
    await requireSameLegs(tx, seen);
    return storeNetwork(tx, network, points.map((point) => point.key));
  });
  return { legEdits: seen, network, keys, home, touched, timeZone, near: [...near].map((i) => points[i]) };
}

/** False where the file has no ping near the junctions. */
async function rematchUpload(ctx: Context, upload: PingUpload & { span: Span }, job: Job, isFirst: boolean, signal: AbortSignal | undefined): Promise<boolean> {
  const tell = async () => signal?.throwIfAborted();
  return withRun(ctx, upload.id, await isLarge(ctx, upload), async (run) => {
    const { pings } = await readFile(ctx, run, upload, { near: job.near, tell });
    if (pings.length === 0) return false;
    const along = await pingsAlong(ctx, run, upload, upload.span, "along");
    const matched = await matchFile(ctx, run, job.network, [...pings, ...along.pings], "network", { wanted: job.touched, span: along.span, tell });
    setTouchedReferences(job, matched.unhindered, isFirst);
    const scene: Scene = { network: job.network, keys: job.keys };
    const tallied = await tallyFile(run, scene, matched, upload.id, job.timeZone, "scene", tell);
    const quarters = await scoreQueues(run, scene, tallied, tell);
    await makePartitions(ctx.db, tallied.days.keys());
    await replace(ctx, run, upload.id, job, tallied, quarters);
    return true;
  });
}

/**
 * Untouched movements have no traversals here: what they rest on stays. On changed legs the first file begins afresh;
 * each later one settles with those before it, as when the files first came in.
 */
function setTouchedReferences({ network, home, touched }: Job, unhindered: number[][], isFirst: boolean): void {
  const kept = network.movements.map((movement) => ({ ...movement }));
  const earlier = isFirst ? kept.filter((movement) => !home.has(network.legs[movement.leg].junction)) : kept;
  setReferencesFrom(network, unhindered);
  settleReferences(network, { ...network, movements: earlier });
  network.movements.forEach((movement, m) => {
    if (!touched[movement.leg]) Object.assign(movement, kept[m]);
  });
}

async function replace(ctx: Context, run: Run, uploadId: string, job: Job, tallied: FileTallied, quarters: readonly DaySlice[]): Promise<void> {
  const { keys, touched } = job;
  const touchedKeys = [...keys.legs].filter((_, l) => touched[l] === 1);
  await bulkTransaction(ctx.db, async (tx, client) => {
    await requireSameLegs(tx, job.legEdits);
    await tx
      .delete(traversalTable)
      .where(
        and(
          eq(traversalTable.uploadId, uploadId),
          or(inArray(traversalTable.legId, touchedKeys), notInArray(traversalTable.legId, [...keys.legs])),
        ),
      );
    await copyTraversals(client, rowsOf(run.store, tallied));
    await patchSlices(tx, uploadId, job, slicesOf(run.store, tallied, quarters));
    await raiseDataVersion(tx);
  });
}

async function patchSlices(db: Db, uploadId: string, { network, keys, touched }: Job, fresh: AsyncIterable<ScreenDay>): Promise<void> {
  const keptMovements = new Set([...keys.movements].filter((_, m) => !touched[network.movements[m].leg]));
  const keptLegs = new Set([...keys.legs].filter((_, l) => !touched[l]));
  const freshByDay = new Map<number, ScreenDay>();
  for await (const slice of fresh) freshByDay.set(slice.day, slice);
  const rows = await db.select().from(screenDays).where(eq(screenDays.uploadId, uploadId));
  for (const row of rows) {
    const rest = keepInScreenDay(decodeScreenDay(row.payload), (key) => keptMovements.has(key), (key) => keptLegs.has(key));
    const added = freshByDay.get(row.day);
    freshByDay.delete(row.day);
    const slice = added ? mergeScreenDays([rest, added]) : rest;
    // A new row, since whoever remembers the old one knows it by its key.
    await db.delete(screenDays).where(eq(screenDays.id, row.id));
    await insertSlice(db, uploadId, row.medianIntervalS, slice);
  }
  for (const slice of freshByDay.values()) await insertSlice(db, uploadId, rows[0]?.medianIntervalS ?? null, slice);
}

async function insertSlice(db: Db, uploadId: string, medianIntervalS: number | null, slice: ScreenDay): Promise<void> {
  await db.insert(screenDays).values({
    uploadId,
    day: slice.day,
    methodVersion: METHOD_VERSION,
    medianIntervalS,
    traversals: slice.delay.length,
    payload: encodeScreenDay(slice),
  });
}
