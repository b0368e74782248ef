import { eq } from "drizzle-orm";
import { uploads } from "@/db/schema";
import { INGEST_STEPS, type IngestProgress, type IngestStep } from "@/domain/upload";
import type { Context } from "../context";

/** Share of the whole at which each step ends, as seen on files of a million rows. */
const ENDS: Record<IngestStep, number> = { read: 0.35, "learn legs": 0.5, match: 0.8, score: 0.88, store: 1 };
const EVERY_MS = 500;

export interface ProgressWriter {
  /** `share` is of the step; writes at most twice a second. Throws when the worker is told to stop. */
  tell(step: IngestStep, share: number, rowsRead: number): Promise<void>;
}

export function openProgress(ctx: Context, uploadId: string, signal: AbortSignal | undefined): ProgressWriter {
  let lastMs = 0;
  return {
    async tell(step, share, rowsRead) {
      signal?.throwIfAborted();
      const nowMs = performance.now();
      if (nowMs - lastMs < EVERY_MS) return;
      lastMs = nowMs;
      const at = INGEST_STEPS.indexOf(step);
      const begin = at === 0 ? 0 : ENDS[INGEST_STEPS[at - 1]];
      const progress: IngestProgress = { step, share: begin + (ENDS[step] - begin) * Math.min(1, share), rowsRead };
      await ctx.db.update(uploads).set({ progress }).where(eq(uploads.id, uploadId));
    },
  };
}
