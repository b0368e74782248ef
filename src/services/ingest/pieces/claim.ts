import type { PoolClient } from "pg";
import { sql } from "drizzle-orm";
import { bulkTransaction } from "@/db/bulk-transaction";
import { helpUpload } from "@/jobs/definitions/help-upload";
import type { Context } from "@/services/context";
import { PIECE_KINDS } from "../steps";
import { storedPieces } from "./piece-store";
import { encodeRecord } from "./records";
import { remembered } from "./remembered";

export type Claim = "done" | "none" | "over";

/** The transaction is idle while the work is done; a machine that vanishes is missed after a minute. */
const PATIENT =
  "set local idle_in_transaction_session_timeout = 0; set local tcp_keepalives_idle = 30; set local tcp_keepalives_interval = 10; set local tcp_keepalives_count = 3";

interface PieceRow {
  id: number;
  kind: string;
  inputs: string;
  number: number;
}

export const outcomeOf = (inputs: string, number: number): string => `${inputs}-${number}.outcome`;

/**
 * Does one piece of a run that nobody else is at. The lock on its row goes with the connection, so a piece whose worker
 * dies is free again. `over` where the one who conducts the run is gone, or there is no such run.
 */
export async function claimPiece(ctx: Context, run: string, tell: (share: number) => Promise<void>): Promise<Claim> {
  return bulkTransaction(ctx.db, async (_, client) => {
    await client.query(PATIENT);
    if (!(await isConducted(client, run))) return "over";
    const { rows } = await client.query<PieceRow>(
      "select id, kind, inputs, number from ingest_pieces where run = $1 and done_at is null order by id limit 1 for update skip locked",
      [run],
    );
    if (rows.length === 0) return "none";
    await doPiece(ctx, run, rows[0], tell);
    await client.query("update ingest_pieces set done_at = now() where id = $1", [rows[0].id]);
    return "done";
  });
}

/** The conductor of a run holds its lock for as long as it lives. */
async function isConducted(client: PoolClient, run: string): Promise<boolean> {
  const { rows } = await client.query<{ free: boolean }>("select pg_try_advisory_xact_lock_shared(hashtextextended($1, 1)) as free", [run]);
  return !rows[0].free;
}

async function doPiece(ctx: Context, run: string, { kind, inputs, number }: PieceRow, tell: (share: number) => Promise<void>): Promise<void> {
  const store = storedPieces(ctx.storage, run);
  const known = PIECE_KINDS.find((candidate) => candidate.name === kind);
  if (!known) throw new TypeError(`This worker knows no work called ${kind}: it is older or newer than the one that asks.`);
  const all = await remembered(store, inputs, "inputs", (value: unknown[]) => value);
  const outcome = await known.work({ db: ctx.db, storage: ctx.storage, store, name: `${inputs}-${number}`, tell }, all[number]);
  await store.put(outcomeOf(inputs, number), [encodeRecord(outcome)]);
}

/** Removes what is left of runs whose conductors are gone. Pieces that somebody is still at wait for the next sweep. */
export async function sweepRuns(ctx: Context): Promise<void> {
  const { rows } = await ctx.db.execute<{ run: string }>(sql`select distinct run from ingest_pieces`);
  for (const { run } of rows) await bulkTransaction(ctx.db, (_, client) => sweepRun(ctx, client, run));
}

async function sweepRun(ctx: Context, client: PoolClient, run: string): Promise<void> {
  const lock = await client.query<{ free: boolean }>("select pg_try_advisory_xact_lock(hashtextextended($1, 1)) as free", [run]);
  if (!lock.rows[0].free) return;
  const { rowCount: held } = await client.query("select 1 from ingest_pieces where run = $1 for update skip locked", [run]);
  const { rows } = await client.query<{ n: number }>("select count(*)::int as n from ingest_pieces where run = $1", [run]);
  if (held !== rows[0].n) return;
  await ctx.queue.withdraw(helpUpload, { run });
  // The rows go last: whoever is killed in between leaves them to the next sweep.
  await storedPieces(ctx.storage, run).clear();
  await client.query("delete from ingest_pieces where run = $1", [run]);
}
