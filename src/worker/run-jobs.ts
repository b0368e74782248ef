import type { Pool } from "pg";
import PgBoss from "pg-boss";
import { ZodError } from "zod";
import { AppError } from "@/domain/errors";
import type { Context } from "@/services/context";
import type { Handler } from "./handler";
import { holdingJob, rescueJobs } from "./rescue";

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

const POLL_S = 1;
const RESCUE_MS = 10_000;
const STOP_MS = 15_000;

export async function runJobs(options: JobRunnerOptions): Promise<JobRunner> {
  const { handlers, pool } = options;
  const boss = new PgBoss({ connectionString: options.databaseUrl, max: 4, schedule: false, migrate: false });
  boss.on("error", (error) => console.error("Job queue:", error.message));
  await boss.start();

  const stopping = new AbortController();
  for (const handler of handlers) {
    for (let i = 0; i < options.concurrency; i++) await startLoop(boss, handler, options, stopping.signal);
  }

  const names = handlers.map((handler) => handler.job.name);
  const rescue = () => rescueJobs(pool, boss, names).catch((error: Error) => console.error("Rescue of jobs:", error.message));
  await rescue();
  const timer = setInterval(rescue, RESCUE_MS);

  return {
    async stop() {
      clearInterval(timer);
      stopping.abort(new Error("The worker is stopping."));
      await boss.stop({ graceful: true, timeout: STOP_MS });
    },
  };
}

async function startLoop(boss: PgBoss, handler: Handler, options: JobRunnerOptions, signal: AbortSignal): Promise<void> {
  await boss.work<object>(
    handler.job.name,
    { includeMetadata: true, batchSize: 1, pollingIntervalSeconds: POLL_S },
    async ([job]) => {
      const run = { jobId: job.id, attempt: job.retryCount + 1, isLast: job.retryCount >= job.retryLimit, signal };
      try {
        await holdingJob(options.pool, job.id, () => handler.handle(options.contextFor(job.name), job.data, run));
      } catch (error) {
        return settle(job, error);
      }
    },
  );
}

/** What cannot succeed by trying again is finished with the reason as its result; the rest goes back to the queue. */
function settle(job: PgBoss.JobWithMetadata<object>, error: unknown): { refused: string } {
  const message = error instanceof Error ? error.message : String(error);
  const isRefusal = error instanceof ZodError || (error instanceof AppError && error.code !== "internal" && error.code !== "conflict");
  console.error(`Job ${job.name} ${job.id}, run ${job.retryCount + 1}: ${message}`);
  if (!isRefusal) throw error;
  return { refused: message };
}
