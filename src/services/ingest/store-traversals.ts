import { sql } from "drizzle-orm";
import type { PoolClient } from "pg";
import { METHOD_VERSION } from "@/core/method-version";
import { encodeTrack } from "@/core/strips/track-codec";
import type { Network, Traversals } from "@/core/types";
import type { Db } from "@/db/client";
import { copyRows, encodeRows } from "@/db/copy-binary";
import { isoFromDay } from "@/domain/local-time";
import type { NetworkKeys } from "./network-rows";

const COLUMNS = [
  "local_day",
  "upload_id",
  "leg_id",
  "movement_id",
  "vehicle",
  "enter_at",
  "stop_line_at",
  "exit_at",
  "delay_s",
  "stops",
  "stopped_s",
  "farthest_stop_m",
  "flags",
  "method_version",
  "track",
];

export interface TraversalRows {
  uploadId: string;
  network: Network;
  keys: NetworkKeys;
  traversals: Traversals;
  /** Local day of each traversal, days since 1970-01-01. */
  localDay: Int32Array;
  /** Keyed hash of each vehicle, by vehicle number. */
  vehicleHash: BigInt64Array;
}

/** The traversals of one upload, or some of them, as rows in PostgreSQL's binary format. */
export function encodeTraversals(rows: TraversalRows): Iterable<Uint8Array> {
  const { traversals, network, keys, localDay } = rows;
  const uploadId = Buffer.from(rows.uploadId.replaceAll("-", ""), "hex");
  return encodeRows(traversals.length, (writer, i) => {
    const movement = traversals.movement[i];
    const from = traversals.trackOffset[i];
    const to = traversals.trackOffset[i + 1];
    writer.row(COLUMNS.length);
    writer.date(localDay[i]);
    writer.bytes(uploadId);
    writer.int4(keys.legs[network.movements[movement].leg]);
    writer.int4(keys.movements[movement]);
    writer.int8(rows.vehicleHash[traversals.vehicle[i]]);
    writer.instant(traversals.enterMs[i]);
    writer.instant(traversals.stopLineMs[i]);
    writer.instant(traversals.exitMs[i]);
    writer.float4(traversals.delayS[i]);
    writer.int2(traversals.stops[i]);
    writer.float4(traversals.stoppedS[i]);
    writer.float4(traversals.farthestStopM[i]);
    writer.int2(traversals.flags[i]);
    writer.int2(METHOD_VERSION);
    writer.bytes(encodeTrack(traversals.trackT.subarray(from, to), traversals.trackS.subarray(from, to)));
  });
}

/** Loads encoded rows into the partitions of their days, which are there already. */
export async function copyTraversals(client: PoolClient, rows: AsyncIterable<Uint8Array> | Iterable<Uint8Array>): Promise<void> {
  await copyRows(client, `traversals (${COLUMNS.join(", ")})`, rows);
}

/**
 * Makes the partitions of local days, each by a statement of its own: a new one locks the whole table until its
 * transaction ends, and nobody could read a strip for as long as an upload is stored.
 */
export async function makePartitions(db: Db, localDay: Iterable<number>): Promise<void> {
  for (const day of new Set(localDay)) {
    const date = isoFromDay(day);
    const name = `traversals_${date.replaceAll("-", "_")}`;
    await db.execute(sql.raw(`create table if not exists ${name} partition of traversals for values in ('${date}')`));
  }
}
