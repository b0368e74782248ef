import { and, between, inArray, ne, sql } from "drizzle-orm";
import type { Network, Traversals } from "@/core/types";
import type { Db } from "@/db/client";
import { screenDays, traversals as table } from "@/db/schema";
import { isoFromDay } from "@/domain/local-time";
import { filterTraversals } from "./join-traversals";
import type { NetworkKeys } from "./network-rows";

/** The same vehicle cannot pass the same stop line twice within this time. */
const SAME_PASSAGE_MS = 30_000;

export interface OverlapQuestion {
  uploadId: string;
  network: Network;
  keys: NetworkKeys;
  /** Of the legs that the traversals are of. */
  legKeys: Int32Array;
  days: ReadonlySet<number>;
  /** By the traversals' vehicle numbers. */
  vehicleHash: BigInt64Array;
}

/** Leaves out what another upload has brought already, so that overlapping files count once. */
export async function dropKnown(db: Db, all: Traversals, question: OverlapQuestion): Promise<Traversals> {
  const { uploadId, network, keys, legKeys, days, vehicleHash } = question;
  if (days.size === 0) return all;
  const others = await db
    .select({ day: screenDays.day })
    .from(screenDays)
    .where(and(inArray(screenDays.day, [...days]), ne(screenDays.uploadId, uploadId)))
    .groupBy(screenDays.day);
  if (others.length === 0) return all;
  const firstMs = all.stopLineMs.reduce((least, ms) => Math.min(least, ms), Infinity);
  const lastMs = all.stopLineMs.reduce((most, ms) => Math.max(most, ms), -Infinity);
  const rows = await db
    .select({
      vehicle: table.vehicle,
      legId: table.legId,
      stopLineMs: sql<number>`extract(epoch from ${table.stopLineAt}) * 1000`.mapWith(Number),
    })
    .from(table)
    .where(
      and(
        inArray(table.localDay, others.map((row) => isoFromDay(row.day))),
        ne(table.uploadId, uploadId),
        sql`${table.legId} = any(${sql.param([...legKeys])}::int[])`,
        // Files of neighbouring days share a local day and hardly a moment: what lies outside this one's span is not read.
        between(table.stopLineAt, new Date(firstMs - SAME_PASSAGE_MS), new Date(lastMs + SAME_PASSAGE_MS)),
      ),
    );
  const known = new Map<string, number[]>();
  for (const row of rows) {
    const key = `${row.vehicle}:${row.legId}`;
    const times = known.get(key);
    if (times) times.push(row.stopLineMs);
    else known.set(key, [row.stopLineMs]);
  }
  return filterTraversals(all, (i) => {
    const leg = keys.legs[network.movements[all.movement[i]].leg];
    const times = known.get(`${vehicleHash[all.vehicle[i]]}:${leg}`);
    return !times?.some((ms) => Math.abs(ms - all.stopLineMs[i]) < SAME_PASSAGE_MS);
  });
}
