import type { Pool, PoolClient } from "pg";
import type PgBoss from "pg-boss";
import { AppError } from "@/domain/errors";

// Fetched a moment ago: its worker may not hold the lock yet.
const GRACE_S = 5;

/**
 * Runs `work` while this connection holds the job's lock. The database drops the lock with the connection,
 * so a job whose lock is free while it counts as running has lost its worker.
 */
export async function holdingJob<T>(pool: Pool, jobId: string, work: () => Promise<T>): Promise<T> {
  const client = await pool.connect();
  try {
    if (!(await tryLock(client, jobId))) throw new AppError("conflict", `Job ${jobId} is being run by another worker.`);
    return await work();
  } finally {
    // Closing the connection frees the lock even where the unlock statement could not be sent.
    client.release(true);
  }
}

/** Hands jobs of dead workers back to the queue; returns how many. */
export async function rescueJobs(pool: Pool, boss: PgBoss, names: string[]): Promise<number> {
  const client = await pool.connect();
  let rescued = 0;
  try {
    const { rows } = await client.query<{ id: string; name: string }>(
      `select id, name from pgboss.job
       where state = 'active' and name = any($1) and started_on < now() - make_interval(secs => $2)
       order by started_on limit 100`,
      [names, GRACE_S],
    );
    for (const { id, name } of rows) {
      if (!(await tryLock(client, id))) continue;
      await boss.fail(name, id, { message: "The worker that ran this job is gone." });
      rescued += 1;
    }
  } finally {
    client.release(true);
  }
  return rescued;
}

async function tryLock(client: PoolClient, jobId: string): Promise<boolean> {
  const { rows } = await client.query<{ locked: boolean }>("select pg_try_advisory_lock(hashtextextended($1, 0)) as locked", [jobId]);
  return rows[0].locked;
}
