import { z } from "zod";
import { defineJob } from "../job";

/** Queued for every address that asks, known or not: only the worker looks, so that the answer's delay tells nothing. */
export const answerResetRequest = defineJob({
  name: "answer-reset-request",
  payload: z.object({ email: z.string() }),
  retries: 5,
  timeoutS: 60,
  key: ({ email }) => email,
});
