import { drizzle } from "drizzle-orm/node-postgres";
import type { Pool, PoolClient } from "pg";
import type { Db } from "./client";
import * as schema from "./schema";

export function poolOf(db: Db): Pool {
  if ("$client" in db) return db.$client as Pool;
  throw new TypeError("Bulk work needs the pool, not a transaction.");
}

/** One transaction in which COPY and ordinary verbs share a connection. */
export async function bulkTransaction<T>(db: Db, work: (tx: Db, client: PoolClient) => Promise<T>): Promise<T> {
  const client = await poolOf(db).connect();
  let broken: Error | undefined;
  // A connection that dies in the middle would else be an unhandled event.
  const onError = (error: Error) => (broken = error);
  client.on("error", onError);
  try {
    await client.query("begin");
    const result = await work(drizzle(client, { schema }), client);
    await client.query("commit");
    return result;
  } catch (error) {
    await client.query("rollback").catch((lost: Error) => (broken = lost));
    throw error;
  } finally {
    client.off("error", onError);
    client.release(broken);
  }
}

/** A machine that vanishes, power and all, is missed after a minute, and its locks are free again. */
const MISS_SOON = "set tcp_keepalives_idle = 30; set tcp_keepalives_interval = 10; set tcp_keepalives_count = 3; set idle_in_transaction_session_timeout = 0";

/** Holds an advisory lock, by number or by name, for as long as the work takes; a process that dies lets go of it. */
export async function withAdvisoryLock<T>(db: Db, key: number | string, work: () => Promise<T>): Promise<T> {
  const client = await poolOf(db).connect();
  const onError = () => undefined;
  client.on("error", onError);
  try {
    await client.query(MISS_SOON);
    if (typeof key === "number") await client.query("select pg_advisory_lock($1)", [key]);
    else await client.query("select pg_advisory_lock(hashtextextended($1, 1))", [key]);
    return await work();
  } finally {
    // Closing the connection releases the lock too, whatever state it is in, but a moment later.
    await client.query("select pg_advisory_unlock_all()").catch(() => undefined);
    client.off("error", onError);
    client.release(true);
  }
}
