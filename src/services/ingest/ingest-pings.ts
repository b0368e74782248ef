import { eq } from "drizzle-orm";
import { METHOD_VERSION } from "@/core/method-version";
import { createNearSampler, encodeNearPings, type NearPings } from "@/core/pings/near-sample";
import { createMatcher, learnNetwork, setReferences } from "@/core/process";
import { legQuarters } from "@/core/queues/leg-quarters";
import { penetrationFromQueues } from "@/core/queues/penetration";
import { buildScreenDays } from "@/core/scores/build-screen-days";
import { localQuarter } from "@/core/scores/local-time";
import { encodeScreenDay } from "@/core/scores/screen-day-codec";
import { joinOpenTracks } from "@/core/traversals/open-tracks";
import { keepSettledReferences } from "@/core/traversals/settled";
import type { Network, OpenTracks, PingColumns, SampleFacts, Traversals } from "@/core/types";
import { bulkTransaction, withAdvisoryLock } from "@/db/bulk-transaction";
import type { Db } from "@/db/client";
import { pingClouds, screenDays, traversals as traversalTable } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { offsetTable } from "@/domain/local-time";
import type { IngestReport } from "@/domain/upload";
import type { RowCounts } from "@/formats/row-tally";
import { VehicleNames } from "@/formats/vehicle-names";
import { createH3Index } from "@/geo/h3-index";
import { raiseDataVersion } from "../catalogue/catalogue";
import type { Context } from "../context";
import { legEdits, LegsChanged, requireSameLegs } from "../legs/leg-edits";
import { getSettings } from "../settings/get-settings";
import { failUpload, finishUpload } from "./finish-upload";
import { joinTraversals } from "./join-traversals";
import { dropKnown } from "./known-traversals";
import { INGEST_LOCK, readJunctionPoints, readNetwork, storedLegKeys, storeNetwork, type KeyedPoint } from "./network-rows";
import { joinPings, openPingStore, type PingStore } from "./ping-store";
import { openProgress, type ProgressWriter } from "./progress";
import { readIntoStore, type PingUpload } from "./read-into-store";
import { openRejects } from "./rejects";
import { makePartitions, storeTraversals } from "./store-traversals";
import { vehicleHashes, vehicleKey } from "./vehicle-hash";

/** Enough vehicles to learn the streets from; the rest only passes over them. */
const LEARNING_PINGS = 4_000_000;
const CLOUDS_PER_STATEMENT = 200;
const MOST_RUNS = 5;

interface Totals {
  pings: number;
  duplicates: number;
  jumps: number;
  trips: number;
  incompleteTraversals: number;
}

/** From the file on storage to ranked screens in the database; the result appears in one transaction. */
export async function ingestPings(ctx: Context, upload: PingUpload, signal?: AbortSignal): Promise<void> {
  const progress = openProgress(ctx, upload.id, signal);
  const store = openPingStore();
  const rejects = openRejects(ctx, upload.id);
  const names = new VehicleNames();
  try {
    const counts = await readIntoStore(ctx, upload, store, names, {
      onReject: (row) => rejects.add(row),
      onProgress: (share) => progress.tell("read", share, store.length),
    });
    const rejectsKey = await rejects.finish();
    if (counts.accepted === 0) {
      const report: IngestReport = { ...counts };
      return await failUpload(ctx, upload.id, "No row of the file could be read as a ping; the report says why.", report, rejectsKey);
    }
    await withAdvisoryLock(ctx.db, INGEST_LOCK, () => untilLegsStay(() => matchAndStore(ctx, upload, store, names, counts, rejectsKey, progress)));
  } catch (error) {
    await rejects.abandon();
    throw error;
  } finally {
    await store.close();
  }
}

/** Legs that an engineer changes while a file is matched to them win: it is matched once more. */
async function untilLegsStay(work: () => Promise<void>): Promise<void> {
  for (let run = 1; ; run++) {
    try {
      return await work();
    } catch (error) {
      if (!(error instanceof LegsChanged) || run === MOST_RUNS) throw error;
    }
  }
}

async function matchAndStore(
  ctx: Context,
  upload: PingUpload,
  store: PingStore,
  names: VehicleNames,
  counts: RowCounts,
  rejectsKey: string | null,
  progress: ProgressWriter,
): Promise<void> {
  const settings = await getSettings(ctx);
  const points = await readJunctionPoints(ctx.db);
  if (points.length === 0) throw new AppError("invalid", "Load the city's junctions first: pings are matched to them.");
  const index = createH3Index();
  const seen = await legEdits(ctx.db);
  const prior = await readNetwork(ctx.db, points, settings.driveSide);
  await progress.tell("learn legs", 0.1, counts.rowsRead);
  const network = learnNetwork(await learningSample(store), points, index, { driveSide: settings.driveSide }, prior);
  const matched = await matchAll(network, store, index, counts, progress);
  setReferences(network, matched.traversals);
  if (prior) keepSettledReferences(network, matched.traversals, prior);

  await progress.tell("score", 0.2, counts.rowsRead);
  const vehicleHash = vehicleHashes(await vehicleKey(ctx.db), names);
  const localTime = offsetTable(settings.timeZone, matched.firstMs, matched.lastMs);
  const daysOf = (all: Traversals) => Int32Array.from({ length: all.length }, (_, i) => localQuarter(all.stopLineMs[i], localTime).day);
  const traversals = await dropKnown(ctx.db, matched.traversals, {
    uploadId: upload.id,
    network,
    legKeys: await storedLegKeys(ctx.db),
    days: [...new Set(daysOf(matched.traversals))],
    vehicleHash,
  });
  const quarters = legQuarters(network, traversals, matched.openTracks);
  const penetration = penetrationFromQueues(network, traversals);

  await progress.tell("store", 0.1, counts.rowsRead);
  const report = reportOf(counts, matched, traversals, network, penetration);
  await makePartitions(ctx.db, daysOf(traversals));
  await bulkTransaction(ctx.db, async (tx, client) => {
    await requireSameLegs(tx, seen);
    await tx.delete(traversalTable).where(eq(traversalTable.uploadId, upload.id));
    await tx.delete(screenDays).where(eq(screenDays.uploadId, upload.id));
    const keys = await storeNetwork(tx, network, points.map((point) => point.key));
    await storeTraversals(client, { uploadId: upload.id, network, keys, traversals, localDay: daysOf(traversals), vehicleHash });
    const vehicle = Uint32Array.from(vehicleHash, (hash) => Number(BigInt.asUintN(32, hash)));
    const slices = buildScreenDays(traversals, quarters, { movement: keys.movements, leg: keys.legs, vehicle }, localTime);
    for (const slice of slices) {
      await tx.insert(screenDays).values({
        uploadId: upload.id,
        day: slice.day,
        methodVersion: METHOD_VERSION,
        medianIntervalS: Number.isFinite(matched.facts.medianIntervalS) ? Math.round(matched.facts.medianIntervalS) : null,
        traversals: slice.delay.length,
        payload: encodeScreenDay(slice),
      });
    }
    await storeClouds(tx, upload.id, points, matched.clouds);
    await finishUpload({ ...ctx, db: tx }, upload.id, report, rejectsKey);
    await raiseDataVersion(tx);
  });
}

async function storeClouds(db: Db, uploadId: string, points: readonly KeyedPoint[], clouds: readonly NearPings[]): Promise<void> {
  await db.delete(pingClouds).where(eq(pingClouds.uploadId, uploadId));
  const rows = points.flatMap((point, j) => (clouds[j].length > 0 ? [{ junctionId: point.key, uploadId, payload: encodeNearPings(clouds[j]) }] : []));
  for (let i = 0; i < rows.length; i += CLOUDS_PER_STATEMENT) await db.insert(pingClouds).values(rows.slice(i, i + CLOUDS_PER_STATEMENT));
}

async function learningSample(store: PingStore): Promise<PingColumns> {
  const parts: PingColumns[] = [];
  let length = 0;
  for await (const bucket of store.buckets()) {
    parts.push(bucket);
    length += bucket.length;
    if (length >= LEARNING_PINGS) break;
  }
  return joinPings(parts);
}

interface MatchedFile {
  traversals: Traversals;
  openTracks: OpenTracks;
  totals: Totals;
  facts: SampleFacts;
  firstMs: number;
  lastMs: number;
  /** By index of the junction. */
  clouds: NearPings[];
}

async function matchAll(
  network: Network,
  store: PingStore,
  index: ReturnType<typeof createH3Index>,
  counts: RowCounts,
  progress: ProgressWriter,
): Promise<MatchedFile> {
  const match = createMatcher(network, index);
  const sampler = createNearSampler(network.junctions, index);
  const parts: Traversals[] = [];
  const open: OpenTracks[] = [];
  const totals: Totals = { pings: 0, duplicates: 0, jumps: 0, trips: 0, incompleteTraversals: 0 };
  let facts: SampleFacts | null = null;
  let vehicles = 0;
  let firstMs = Infinity;
  let lastMs = -Infinity;
  for await (const bucket of store.buckets()) {
    const matched = match(bucket);
    parts.push(matched.traversals);
    open.push(matched.openTracks);
    sampler.add(bucket);
    for (const name of Object.keys(totals) as (keyof Totals)[]) totals[name] += matched.report[name];
    vehicles += matched.facts.vehicles;
    // Every bucket holds a fair share of all vehicles: the first one's interval stands for the file's.
    facts = { ...(facts ?? matched.facts), vehicles };
    for (let i = 0; i < bucket.length; i++) {
      if (bucket.tMs[i] < firstMs) firstMs = bucket.tMs[i];
      if (bucket.tMs[i] > lastMs) lastMs = bucket.tMs[i];
    }
    await progress.tell("match", totals.pings / counts.accepted, counts.rowsRead);
  }
  return { traversals: joinTraversals(parts), openTracks: joinOpenTracks(open), totals, facts: facts as SampleFacts, firstMs, lastMs, clouds: sampler.finish() };
}

function reportOf(counts: RowCounts, matched: MatchedFile, traversals: Traversals, network: Network, penetration: number): IngestReport {
  const covered = new Set<number>();
  const used = new Set<number>();
  for (let i = 0; i < traversals.length; i++) {
    const leg = network.movements[traversals.movement[i]].leg;
    used.add(leg);
    covered.add(network.legs[leg].junction);
  }
  return {
    ...counts,
    vehicles: matched.facts.vehicles,
    trips: matched.totals.trips,
    traversals: traversals.length,
    knownTraversals: matched.traversals.length - traversals.length,
    incompleteTraversals: matched.totals.incompleteTraversals,
    duplicatePings: matched.totals.duplicates,
    jumps: matched.totals.jumps,
    junctionsCovered: covered.size,
    junctionsTotal: network.junctions.length,
    legsFound: used.size,
    firstAt: new Date(matched.firstMs).toISOString(),
    lastAt: new Date(matched.lastMs).toISOString(),
    medianIntervalS: Number.isFinite(matched.facts.medianIntervalS) ? matched.facts.medianIntervalS : undefined,
    penetration: Number.isFinite(penetration) ? penetration : undefined,
    hasSpeed: matched.facts.hasSpeed,
    hasHeading: matched.facts.hasHeading,
  };
}
