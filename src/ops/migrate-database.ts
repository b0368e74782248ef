import { migrate } from "drizzle-orm/node-postgres/migrator";
import { openDatabase } from "@/db/client";
import { JOBS } from "@/jobs/definitions";
import { prepareQueues } from "@/jobs/queue";

// Any number will do, as long as nobody else takes it for another lock.
const MIGRATION_LOCK = 7_240_1188;

/** Brings tables and queues up to date. Of two that start at once, the second waits for the first. */
export async function migrateDatabase(url: string, migrationsFolder: string): Promise<void> {
  const database = openDatabase(url, { max: 2 });
  const lock = await database.pool.connect();
  try {
    await lock.query("select pg_advisory_lock($1)", [MIGRATION_LOCK]);
    await migrate(database.db, { migrationsFolder });
    await prepareQueues(url, JOBS);
  } finally {
    lock.release(true);
    await database.close();
  }
}
