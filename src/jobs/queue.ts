import { sql } from "drizzle-orm";
import PgBoss from "pg-boss";
import type { Db } from "@/db/client";
import type { JobDefinition } from "./job";

export interface Queue {
  /**
   * Queues a job; given a transaction, only if that commits. False when one of the same key waits already.
   * Throws a ZodError for a payload of the wrong shape.
   */
  enqueue<P extends object>(job: JobDefinition<P>, payload: NoInfer<P>, options?: EnqueueOptions): Promise<boolean>;
  /** Takes back the jobs whose payload holds `part` and that nobody has begun. */
  withdraw<P extends object>(job: JobDefinition<P>, part: NoInfer<Partial<P>>): Promise<void>;
  /** How far the newest jobs are whose payload holds `part`; null where none waits, runs or has failed last. */
  stateOf<P extends object>(job: JobDefinition<P>, part: NoInfer<Partial<P>>): Promise<JobState | null>;
  stop(): Promise<void>;
}

export interface EnqueueOptions {
  db?: Db;
  /** Earliest begin, seconds from now; needs a transaction, or a worker may be quicker. */
  afterS?: number;
}

export type JobState = "waiting" | "running" | "failed";

/** A queue that can only be filled. Its tables are made by `prepareQueues`. */
export function openQueue(db: Db): Queue {
  const boss = new PgBoss({ db: executorOf(db), migrate: false, supervise: false, schedule: false });
  boss.on("error", (error) => console.error("Job queue:", error.message));
  let started: Promise<unknown> | undefined;

  return {
    async enqueue(job, payload, options = {}) {
      started ??= boss.start();
      await started;
      const id = await boss.send(job.name, job.payload.parse(payload), {
        ...sendOptions(job, payload),
        ...(options.db && { db: executorOf(options.db) }),
      });
      if (id !== null && options.afterS !== undefined) await postpone(options.db ?? db, job.name, id, options.afterS);
      return id !== null;
    },
    async withdraw(job, part) {
      await db.execute(
        sql`delete from pgboss.job where name = ${job.name} and data @> ${JSON.stringify(part)}::jsonb and state in ('created', 'retry')`,
      );
    },
    async stateOf(job, part) {
      const { rows } = await db.execute<{ state: string }>(
        sql`select state::text as state from pgboss.job where name = ${job.name} and data @> ${JSON.stringify(part)}::jsonb order by created_on desc, id limit 100`,
      );
      const states = rows.map((row) => row.state);
      if (states.includes("active")) return "running";
      if (states.includes("created") || states.includes("retry")) return "waiting";
      return states[0] === "failed" ? "failed" : null;
    },
    async stop() {
      if (started) await boss.stop({ graceful: false, close: false });
    },
  };
}

/** The library's own option is one parameter of two types, which the executor below cannot pass on. */
async function postpone(db: Db, name: string, id: string, afterS: number): Promise<void> {
  await db.execute(sql`update pgboss.job set start_after = now() + make_interval(secs => ${afterS}) where name = ${name} and id = ${id}`);
}

function sendOptions<P extends object>(job: JobDefinition<P>, payload: P): PgBoss.SendOptions {
  return {
    retryLimit: job.retries,
    retryDelay: 5,
    retryBackoff: true,
    expireInSeconds: job.timeoutS,
    ...(job.key && { singletonKey: job.key(payload) }),
  };
}

/** Makes or updates the queue's tables and one queue for each job. Safe to run twice. */
export async function prepareQueues(databaseUrl: string, jobs: readonly Pick<JobDefinition<never>, "name" | "key">[]): Promise<void> {
  const boss = new PgBoss({ connectionString: databaseUrl, max: 2, supervise: false, schedule: false });
  boss.on("error", (error) => console.error("Job queue:", error.message));
  await boss.start();
  try {
    // "short" keeps one waiting job for each key; without keys it would keep one waiting job at all.
    for (const job of jobs) await boss.createQueue(job.name, { name: job.name, policy: job.key ? "short" : "standard" });
  } finally {
    await boss.stop({ graceful: false });
  }
}

/** Lets the queue speak through a pool or a transaction that is already open. */
export function executorOf(db: Db): PgBoss.Db {
  return {
    async executeSql(text, values: unknown[] = []) {
      const parts = text.split(/(\$\d+)/).map((part) => {
        const place = /^\$(\d+)$/.exec(part);
        return place ? sql`${sql.param(values[Number(place[1]) - 1])}` : sql.raw(part);
      });
      const result = await db.execute(sql.join(parts));
      return { rows: result.rows };
    },
  };
}
