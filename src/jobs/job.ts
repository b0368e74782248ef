import type { z } from "zod";

/** What a job is called, what it is given and how often it may fail. The work itself lives in the worker. */
export interface JobDefinition<P extends object> {
  name: string;
  payload: z.ZodType<P>;
  /** Runs after the first that are tried when it fails. */
  retries: number;
  /** A run that takes longer counts as failed. */
  timeoutS: number;
  /** While one job of a key waits, another is not queued. */
  key?: (payload: P) => string;
}

export function defineJob<P extends object>(definition: JobDefinition<P>): JobDefinition<P> {
  return definition;
}
