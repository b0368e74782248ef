import { answerResetRequest } from "@/jobs/definitions/answer-reset-request";
import { AskForReset } from "@/domain/people";
import { AppError } from "@/domain/errors";
import type { Context } from "../context";
import { takeReset } from "./attempts";

/** Does the same, and so takes the same time, whether or not there is such an account. Open to all; limited by address. */
export async function askForReset(ctx: Context, input: AskForReset & { address: string }): Promise<void> {
  const { email } = AskForReset.parse(input);
  if (!(await takeReset(ctx.db, input.address, ctx.now))) {
    throw new AppError("too_many", "Too many requests from this address. Try again in a quarter of an hour.");
  }
  await ctx.queue.enqueue(answerResetRequest, { email });
}
