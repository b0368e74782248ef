import { eq } from "drizzle-orm";
import { METHOD_VERSION } from "@/core/method-version";
import { encodeNearPings, type NearPings } from "@/core/pings/near-sample";
import { learnNetwork } from "@/core/process";
import { encodeScreenDay } from "@/core/scores/screen-day-codec";
import { setReferencesFrom } from "@/core/traversals/references";
import { settleReferences } from "@/core/traversals/settled";
import type { Network } from "@/core/types";
import { bulkTransaction, withAdvisoryLock } from "@/db/bulk-transaction";
import type { Db } from "@/db/client";
import { pingClouds, screenDays, traversals as traversalTable } from "@/db/schema";
import { AppError } from "@/domain/errors";
import type { IngestReport } from "@/domain/upload";
import type { RowCounts } from "@/formats/row-tally";
import { createH3Index } from "@/geo/h3-index";
import { raiseDataVersion } from "../catalogue/catalogue";
import type { Context } from "../context";
import { legEdits, LegsChanged, requireSameLegs } from "../legs/leg-edits";
import { getSettings } from "../settings/get-settings";
import { dropEdges, keepEdges, pingsAlong } from "./edges";
import { failUpload, finishUpload } from "./finish-upload";
import { learningSample, type LearningSample } from "./learning-sample";
import { matchFile, type FileMatched } from "./match-file";
import { INGEST_LOCK, readJunctionPoints, readNetwork, reserveKeys, storeNetwork, type KeyedPoint } from "./network-rows";
import { oneAtATime } from "./pieces/one-at-a-time";
import { withRun, type Run } from "./pieces/run";
import { openProgress, type ProgressWriter } from "./progress";
import { isLarge, readFile, type FileRead, type PingUpload } from "./read-file";
import { openRejects } from "./rejects";
import { rowsOf, scoreQueues, slicesOf, tallyFile, type FileTallied } from "./score-file";
import type { DaySlice, Scene } from "./steps/tally-legs";
import { copyTraversals, makePartitions } from "./store-traversals";

const CLOUDS_PER_STATEMENT = 200;
const MOST_RUNS = 5;

/** From the file on storage to ranked screens in the database; the result appears in one transaction. */
export async function ingestPings(ctx: Context, upload: PingUpload, signal?: AbortSignal): Promise<void> {
  const progress = openProgress(ctx, upload.id, signal);
  const rejects = openRejects(ctx, upload.id);
  try {
    await withRun(ctx, upload.id, await isLarge(ctx, upload), async (run) => {
      const read = await readFile(ctx, run, upload, { onReject: (row) => rejects.add(row), tell: (share) => progress.tell("read", share, 0) });
      const rejectsKey = await rejects.finish();
      if (read.counts.accepted === 0) {
        const report: IngestReport = { ...read.counts };
        return failUpload(ctx, upload.id, "No row of the file could be read as a ping; the report says why.", report, rejectsKey);
      }
      await keepEdges(ctx, run, upload, read.pings, read.span, (share) => progress.tell("read", share, read.counts.rowsRead));
      await withAdvisoryLock(ctx.db, INGEST_LOCK, () => untilLegsStay((turn) => matchAndStore({ ctx, run, upload, read, rejectsKey, progress, turn })));
    });
  } catch (error) {
    await rejects.abandon();
    await dropEdges(ctx, upload.id);
    throw error;
  }
}

/** Legs that an engineer changes while a file is matched to them win: it is matched once more. */
async function untilLegsStay(work: (turn: number) => Promise<void>): Promise<void> {
  for (let turn = 1; ; turn++) {
    try {
      return await work(turn);
    } catch (error) {
      if (!(error instanceof LegsChanged) || turn === MOST_RUNS) throw error;
    }
  }
}

interface Reading {
  ctx: Context;
  run: Run;
  upload: PingUpload;
  read: FileRead;
  rejectsKey: string | null;
  progress: ProgressWriter;
  /** From 1: how often the file has been matched. */
  turn: number;
}

async function matchAndStore(reading: Reading): Promise<void> {
  const { ctx, run, upload, read, progress, turn } = reading;
  const settings = await getSettings(ctx);
  const points = await readJunctionPoints(ctx.db);
  if (points.length === 0) throw new AppError("invalid", "Load the city's junctions first: pings are matched to them.");
  const rows = read.counts.rowsRead;
  const seen = await legEdits(ctx.db);
  const prior = await readNetwork(ctx.db, points, settings.driveSide);
  const along = await pingsAlong(ctx, run, upload, read.span, `along-${turn}`);
  await progress.tell("learn legs", 0.1, rows);
  const { network, sample } = await oneAtATime(async () => {
    const index = createH3Index();
    const { pings, ...sample } = await learningSample(run.store, read.pings, points, index);
    return { network: learnNetwork(pings, points, index, { driveSide: settings.driveSide }, prior), sample };
  });
  const matched = await matchFile(ctx, run, network, [...read.pings, ...along.pings], `network-${turn}`, {
    cloudSlots: sample.slots,
    span: along.span,
    tell: (share) => progress.tell("match", share, rows),
  });
  setReferencesFrom(network, matched.unhindered);
  if (prior) settleReferences(network, prior);
  const scene: Scene = { network, keys: await reserveKeys(ctx.db, network) };
  const tallied = await tallyFile(run, scene, matched, upload.id, settings.timeZone, `scene-${turn}`, (share) => progress.tell("score", share, rows));
  await makePartitions(ctx.db, tallied.days.keys());
  await store({ ...reading, points, seen, scene, matched, tallied, sample, remarks: along.remarks });
}

interface Result extends Reading {
  points: KeyedPoint[];
  /** Changes of legs by hand when the network was read. */
  seen: number;
  scene: Scene;
  matched: FileMatched;
  tallied: FileTallied;
  sample: Omit<LearningSample, "pings">;
  remarks: string[];
}

async function store(result: Result): Promise<void> {
  const { ctx, run, upload, rejectsKey, points, seen, scene, matched, tallied, progress } = result;
  const tell = (share: number) => progress.tell("store", share, result.read.counts.rowsRead);
  await bulkTransaction(ctx.db, async (tx, client) => {
    await requireSameLegs(tx, seen);
    await tx.delete(traversalTable).where(eq(traversalTable.uploadId, upload.id));
    await tx.delete(screenDays).where(eq(screenDays.uploadId, upload.id));
    await storeNetwork(tx, scene.network, points.map((point) => point.key), scene.keys);
    // The database takes the rows in while the workers go on.
    const [quarters] = await bothOf(scoreQueues(run, scene, tallied, tell), copyTraversals(client, rowsOf(run.store, tallied)));
    await storeSlices(tx, result, quarters);
    await storeClouds(tx, upload.id, points, matched.clouds);
    await finishUpload({ ...ctx, db: tx }, upload.id, reportOf(result), rejectsKey);
    await raiseDataVersion(tx);
  });
}

/** Both results, or the first failure, once neither goes on. */
async function bothOf<A, B>(a: Promise<A>, b: Promise<B>): Promise<[A, B]> {
  await Promise.allSettled([a, b]);
  return Promise.all([a, b]);
}

async function storeSlices(db: Db, { run, upload, tallied, sample }: Result, quarters: readonly DaySlice[]): Promise<void> {
  for await (const slice of slicesOf(run.store, tallied, quarters)) {
    await db.insert(screenDays).values({
      uploadId: upload.id,
      day: slice.day,
      methodVersion: METHOD_VERSION,
      medianIntervalS: Number.isFinite(sample.medianIntervalS) ? Math.round(sample.medianIntervalS) : null,
      traversals: tallied.days.get(slice.day) ?? 0,
      payload: encodeScreenDay(slice),
    });
  }
}

async function storeClouds(db: Db, uploadId: string, points: readonly KeyedPoint[], clouds: readonly NearPings[]): Promise<void> {
  await db.delete(pingClouds).where(eq(pingClouds.uploadId, uploadId));
  const rows = points.flatMap((point, j) => (clouds[j].length > 0 ? [{ junctionId: point.key, uploadId, payload: encodeNearPings(clouds[j]) }] : []));
  for (let i = 0; i < rows.length; i += CLOUDS_PER_STATEMENT) await db.insert(pingClouds).values(rows.slice(i, i + CLOUDS_PER_STATEMENT));
}

function reportOf({ read, matched, tallied, scene: { network }, sample, remarks }: Result): IngestReport {
  const counts: RowCounts = read.counts;
  const used = legsUsed(network, tallied);
  return {
    ...counts,
    vehicles: matched.vehicles,
    trips: matched.totals.trips,
    traversals: tallied.traversals,
    knownTraversals: tallied.matched - tallied.traversals,
    incompleteTraversals: matched.totals.incompleteTraversals,
    duplicatePings: matched.totals.duplicates,
    jumps: matched.totals.jumps,
    junctionsCovered: new Set(used.map((leg) => network.legs[leg].junction)).size,
    junctionsTotal: network.junctions.length,
    legsFound: used.length,
    firstAt: new Date(read.span.firstMs).toISOString(),
    lastAt: new Date(read.span.lastMs).toISOString(),
    medianIntervalS: Number.isFinite(sample.medianIntervalS) ? sample.medianIntervalS : undefined,
    penetration: Number.isFinite(tallied.penetration) ? tallied.penetration : undefined,
    hasSpeed: sample.hasSpeed,
    hasHeading: sample.hasHeading,
    remarks: remarks.length > 0 ? remarks : undefined,
  };
}

/** Indices of the legs that a traversal was counted on. */
function legsUsed(network: Network, { groups }: FileTallied): number[] {
  const used = new Uint8Array(network.legs.length);
  for (const group of groups) used.set(group.used, group.legs.from);
  return network.legs.map((_, leg) => leg).filter((leg) => used[leg] === 1);
}
