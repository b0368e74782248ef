import { z } from "zod";
import { defineJob } from "../job";

/** Invitation or reset. The worker makes the token, so that none rests in the queue. */
export const sendPasswordMail = defineJob({
  name: "send-password-mail",
  payload: z.object({ userId: z.uuid(), purpose: z.enum(["invitation", "reset"]) }),
  retries: 5,
  timeoutS: 60,
  key: ({ userId, purpose }) => `${purpose}:${userId}`,
});
