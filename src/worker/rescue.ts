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

/**
 * Puts running jobs back into the queue as if they had not been begun: a worker that is told to stop is no failure
 * of theirs, so it costs them none of their runs. A job that has ended in the meantime is left alone.
 */
export async function handBack(pool: Pool, jobIds: readonly string[]): Promise<void> {
  // The delay lets this process and its locks go first. Without its start the queue counts no run.
  await pool.query(
    `update pgboss.job set state = 'retry', started_on = null, start_after = now() + interval '2 seconds'
     where id = any($1) and state = 'active'`,
    [jobIds],
  );
}

export interface LostJob {
  id: string;
  name: string;
  data: object;
  /** It has no run left: nobody will take it up again. */
  isOver: boolean;
}

/** Hands jobs of dead workers back to the queue; answers with them. */
export async function rescueJobs(pool: Pool, boss: PgBoss, names: string[]): Promise<LostJob[]> {
  const client = await pool.connect();
  const rescued: LostJob[] = [];
  try {
    const { rows } = await client.query<LostJob>(
      `select id, name, data, retry_count >= retry_limit as "isOver" from pgboss.job
       where state = 'active' and name = any($1) and started_on < now() - make_interval(secs => $2)
       order by started_on limit 100`,
      [names, GRACE_S],
    );
    for (const job of rows) {
      if (!(await tryLock(client, job.id))) continue;
      await boss.fail(job.name, job.id, { message: "The worker that ran this job is gone." });
      rescued.push(job);
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
