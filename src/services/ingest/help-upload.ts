import { AppError } from "@/domain/errors";
import type { Context } from "../context";
import { helpRun } from "./pieces/run";

/** Does pieces of a reading that another worker conducts, until there is nothing left of it. */
export async function helpUpload(ctx: Context, input: { run: string }, job?: { signal: AbortSignal }): Promise<void> {
  if (ctx.actor.type !== "job") throw new AppError("forbidden", "Only a worker helps another.");
  try {
    await helpRun(ctx, input.run, job?.signal);
  } catch (error) {
    // A file that cannot be used: the one who conducts the reading meets the same and says so.
    if (!(error instanceof AppError)) throw error;
  }
}
