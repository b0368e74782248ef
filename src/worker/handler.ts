import type { JobDefinition } from "@/jobs/job";
import type { Context } from "@/services/context";

export interface Run {
  jobId: string;
  /** 1 for the first. */
  attempt: number;
  /** A failure of this run is final. */
  isLast: boolean;
  /** Aborted when the worker is told to stop: leave off at the next safe point by throwing. */
  signal: AbortSignal;
}

export interface Handler {
  job: Pick<JobDefinition<never>, "name">;
  handle(ctx: Context, payload: unknown, run: Run): Promise<void>;
  /** Says where people see it that the job is over without a result: its workers died one after the other. */
  giveUp(ctx: Context, payload: unknown): Promise<void>;
}

/** Joins a job's contract to its work; the payload is checked before the work sees it. */
export function handler<P extends object>(
  job: JobDefinition<P>,
  work: (ctx: Context, payload: P, run: Run) => Promise<unknown>,
  giveUp?: (ctx: Context, payload: P) => Promise<unknown>,
): Handler {
  return {
    job,
    async handle(ctx, payload, run) {
      await work(ctx, job.payload.parse(payload), run);
    },
    async giveUp(ctx, payload) {
      await giveUp?.(ctx, job.payload.parse(payload));
    },
  };
}
