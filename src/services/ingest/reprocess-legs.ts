import { and, eq, inArray, notInArray, or } from "drizzle-orm";
import { METHOD_VERSION } from "@/core/method-version";
import { relistMovements } from "@/core/legs/relist";
import { createMatcher, setReferences, type Matched } from "@/core/process";
import { joinOpenTracks } from "@/core/traversals/open-tracks";
import { keepSettledReferences } from "@/core/traversals/settled";
import { legQuarters } from "@/core/queues/leg-quarters";
import { buildScreenDays } from "@/core/scores/build-screen-days";
import { keepInScreenDay } from "@/core/scores/leave-out";
import { localQuarter } from "@/core/scores/local-time";
import { mergeScreenDays } from "@/core/scores/merge-screen-days";
import { decodeScreenDay, encodeScreenDay } from "@/core/scores/screen-day-codec";
import type { ScreenDay } from "@/core/scores/types";
import type { Network, OpenTracks, PingColumns, Traversals } from "@/core/types";
import { bulkTransaction, withAdvisoryLock } from "@/db/bulk-transaction";
import type { Db } from "@/db/client";
import { screenDays, traversals as traversalTable } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { offsetTable } from "@/domain/local-time";
import { emptyColumns } from "@/formats/pings/ping-columns";
import { VehicleNames } from "@/formats/vehicle-names";
import { createH3Index } from "@/geo/h3-index";
import { reprocessLegs as reprocessJob } from "@/jobs/definitions/reprocess-legs";
import { raiseDataVersion } from "../catalogue/catalogue";
import type { Context } from "../context";
import { legEdits, LegsChanged, requireSameLegs } from "../legs/leg-edits";
import { getSettings } from "../settings/get-settings";
import { filterTraversals, joinTraversals } from "./join-traversals";
import { dropKnown } from "./known-traversals";
import { INGEST_LOCK, readJunctionPoints, readNetwork, storedLegKeys, storeNetwork, type KeyedPoint, type NetworkKeys } from "./network-rows";
import { pingFiles } from "./ping-files";
import { openPingStore } from "./ping-store";
import { readIntoStore, type PingUpload } from "./read-into-store";
import { makePartitions, storeTraversals } from "./store-traversals";
import { vehicleHashes, vehicleKey } from "./vehicle-hash";

/** Pings farther than this from the changed junctions take no part in their legs or in those of their neighbours, degrees. */
const NEAR_LAT_DEG = 0.02;
const CELLS_PER_ROW = 100_000;

interface Job {
  /** Changes of legs by hand when the network was read. */
  legEdits: number;
  network: Network;
  keys: NetworkKeys;
  /** Indices of the junctions whose legs were changed. */
  home: ReadonlySet<number>;
  /** 1 for each leg that the change touches: the junction's own and those that it feeds. */
  touched: Uint8Array;
  choose: (batch: PingColumns) => PingColumns;
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
    if (await rematchUpload(ctx, file, job, isFirst)) isFirst = false;
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
  return { legEdits: seen, network, keys, home, touched, timeZone, choose: nearOnly([...near].map((i) => points[i])) };
}

/** Keeps the pings of the cells, NEAR_LAT_DEG high, that the junctions lie in or beside. */
function nearOnly(points: readonly KeyedPoint[]): Job["choose"] {
  const lonDeg = NEAR_LAT_DEG / Math.max(0.05, Math.cos((points[0].lat * Math.PI) / 180));
  const cellOf = (lat: number, lon: number, up = 0, right = 0) => (Math.floor(lat / NEAR_LAT_DEG) + up) * CELLS_PER_ROW + Math.floor(lon / lonDeg) + right;
  const steps = [-1, 0, 1];
  const cells = new Set(points.flatMap(({ lat, lon }) => steps.flatMap((up) => steps.map((right) => cellOf(lat, lon, up, right)))));
  return (batch) => chosenRows(batch, (i) => cells.has(cellOf(batch.lat[i], batch.lon[i])));
}

function chosenRows(batch: PingColumns, isChosen: (i: number) => boolean): PingColumns {
  const chosen: number[] = [];
  for (let i = 0; i < batch.length; i++) if (isChosen(i)) chosen.push(i);
  const some = emptyColumns(chosen.length);
  some.length = chosen.length;
  for (const name of ["vehicle", "tMs", "lat", "lon", "speedMs", "headingDeg"] as const) {
    chosen.forEach((from, to) => (some[name][to] = batch[name][from]));
  }
  return some;
}

/** False where the file has no ping near the junctions. */
async function rematchUpload(ctx: Context, upload: PingUpload, job: Job, isFirst: boolean): Promise<boolean> {
  const names = new VehicleNames();
  const store = openPingStore();
  try {
    await readIntoStore(ctx, upload, store, names, { choose: job.choose });
    const match = createMatcher(job.network, createH3Index());
    const parts: Traversals[] = [];
    const open: OpenTracks[] = [];
    for await (const bucket of store.buckets()) {
      const matched = match(bucket);
      parts.push(touchedOnly(matched.traversals, job));
      open.push(joinOpenTracks([matched.openTracks], (leg) => job.touched[leg] === 1));
    }
    if (parts.length === 0) return false;
    const traversals = joinTraversals(parts);
    setTouchedReferences(job, traversals, isFirst);
    await replace(ctx, upload.id, job, { traversals, openTracks: joinOpenTracks(open) }, vehicleHashes(await vehicleKey(ctx.db), names));
    return true;
  } finally {
    await store.close();
  }
}

function touchedOnly(all: Traversals, { network, touched }: Job): Traversals {
  return filterTraversals(all, (i) => touched[network.movements[all.movement[i]].leg] === 1);
}

/**
 * Untouched movements have no traversals here: what they rest on stays. On changed legs the first file begins afresh;
 * each later one settles with those before it, as when the files first came in.
 */
function setTouchedReferences({ network, home, touched }: Job, traversals: Traversals, isFirst: boolean): void {
  const kept = network.movements.map((movement) => ({ ...movement }));
  const earlier = isFirst ? kept.filter((movement) => !home.has(network.legs[movement.leg].junction)) : kept;
  setReferences(network, traversals);
  keepSettledReferences(network, traversals, { ...network, movements: earlier });
  network.movements.forEach((movement, m) => {
    if (!touched[movement.leg]) Object.assign(movement, kept[m]);
  });
}

async function replace(ctx: Context, uploadId: string, job: Job, matched: Pick<Matched, "traversals" | "openTracks">, vehicleHash: BigInt64Array): Promise<void> {
  const { traversals: all, openTracks } = matched;
  const { network, keys, touched } = job;
  const [firstMs, lastMs] = spanOf(all);
  const localTime = offsetTable(job.timeZone, firstMs, lastMs);
  const daysOf = (some: Traversals) => Int32Array.from({ length: some.length }, (_, i) => localQuarter(some.stopLineMs[i], localTime).day);
  const traversals = await dropKnown(ctx.db, all, {
    uploadId,
    network,
    legKeys: await storedLegKeys(ctx.db),
    days: [...new Set(daysOf(all))],
    vehicleHash,
  });
  const quarters = legQuarters(network, traversals, openTracks);
  const vehicle = Uint32Array.from(vehicleHash, (hash) => Number(BigInt.asUintN(32, hash)));
  const fresh = buildScreenDays(traversals, quarters, { movement: keys.movements, leg: keys.legs, vehicle }, localTime);
  const touchedKeys = [...keys.legs].filter((_, l) => touched[l] === 1);
  await makePartitions(ctx.db, daysOf(traversals));
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
    await storeTraversals(client, { uploadId, network, keys, traversals, localDay: daysOf(traversals), vehicleHash });
    await patchSlices(tx, uploadId, job, fresh);
    await raiseDataVersion(tx);
  });
}

async function patchSlices(db: Db, uploadId: string, { network, keys, touched }: Job, fresh: ScreenDay[]): Promise<void> {
  const keptMovements = new Set([...keys.movements].filter((_, m) => !touched[network.movements[m].leg]));
  const keptLegs = new Set([...keys.legs].filter((_, l) => !touched[l]));
  const freshByDay = new Map(fresh.map((slice) => [slice.day, slice]));
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

function spanOf(all: Traversals): [number, number] {
  let first = Infinity;
  let last = -Infinity;
  for (let i = 0; i < all.length; i++) {
    if (all.stopLineMs[i] < first) first = all.stopLineMs[i];
    if (all.stopLineMs[i] > last) last = all.stopLineMs[i];
  }
  return all.length === 0 ? [0, 0] : [first, last];
}
