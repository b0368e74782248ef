import { setTimeout as delay } from "node:timers/promises";
import type { Pool } from "pg";
import PgBoss from "pg-boss";
import { ZodError } from "zod";
import { AppError } from "@/domain/errors";
import type { Context } from "@/services/context";
import type { Handler } from "./handler";
import { handBack, holdingJob, rescueJobs } from "./rescue";

export interface JobRunnerOptions {
  databaseUrl: string;
  pool: Pool;
  handlers: readonly Handler[];
  /** Jobs of one name that run at the same time. */
  concurrency: number;
  contextFor: (jobName: string) => Context;
}

export interface JobRunner {
  /** Lets running jobs come to a safe point, then hands the rest back to the queue. */
  stop(): Promise<void>;
}

/** The least that the queue library takes. */
const POLL_S = 0.5;
const RESCUE_MS = 10_000;
const STOP_MS = 15_000;
const STOP_STEP_MS = 50;

export async function runJobs(options: JobRunnerOptions): Promise<JobRunner> {
  const { handlers, pool } = options;
  const boss = new PgBoss({ connectionString: options.databaseUrl, max: 4, schedule: false, migrate: false });
  boss.on("error", (error) => console.error("Job queue:", error.message));
  await boss.start();

  const stopping = new AbortController();
  const running = new Set<string>();
  for (const handler of handlers) {
    for (let i = 0; i < options.concurrency; i++) await startLoop(boss, handler, options, { signal: stopping.signal, running });
  }

  const rescue = () => rescueLost(boss, options).catch((error: Error) => console.error("Rescue of jobs:", error.message));
  await rescue();
  const timer = setInterval(rescue, RESCUE_MS);

  return {
    async stop() {
      clearInterval(timer);
      stopping.abort(new Error("The worker is stopping."));
      for (let waitedMs = 0; running.size > 0 && waitedMs < STOP_MS; waitedMs += STOP_STEP_MS) await delay(STOP_STEP_MS);
      await handBack(pool, [...running]);
      await boss.stop({ graceful: true, timeout: 1_000 });
    },
  };
}

async function rescueLost(boss: PgBoss, { pool, handlers, contextFor }: JobRunnerOptions): Promise<void> {
  for (const job of await rescueJobs(pool, boss, handlers.map((handler) => handler.job.name))) {
    const handler = handlers.find((candidate) => candidate.job.name === job.name);
    if (job.isOver) await handler?.giveUp(contextFor(job.name), job.data);
  }
}

interface Loop {
  signal: AbortSignal;
  /** Ids of the jobs in hand. */
  running: Set<string>;
}

async function startLoop(boss: PgBoss, handler: Handler, options: JobRunnerOptions, { signal, running }: Loop): Promise<void> {
  await boss.work<object>(
    handler.job.name,
    { includeMetadata: true, batchSize: 1, pollingIntervalSeconds: POLL_S },
    async ([job]) => {
      const run = { jobId: job.id, attempt: job.retryCount + 1, isLast: job.retryCount >= job.retryLimit, signal };
      running.add(job.id);
      try {
        await holdingJob(options.pool, job.id, () => handler.handle(options.contextFor(job.name), job.data, run));
      } catch (error) {
        if (isRefusal(error) || !signal.aborted) return settle(job, error);
        await handBack(options.pool, [job.id]);
      } finally {
        running.delete(job.id);
      }
    },
  );
}

function isRefusal(error: unknown): boolean {
  return error instanceof ZodError || (error instanceof AppError && error.code !== "internal" && error.code !== "conflict");
}

/** What cannot succeed by trying again is finished with the reason as its result; the rest goes back to the queue. */
function settle(job: PgBoss.JobWithMetadata<object>, error: unknown): { refused: string } {
  const message = error instanceof Error ? error.message : String(error);
  console.error(`Job ${job.name} ${job.id}, run ${job.retryCount + 1}: ${message}`);
  if (!isRefusal(error)) throw error;
  return { refused: message };
}
