import { z } from "zod";
import { defineJob } from "../job";

/** Asks a worker that has nothing else to do to take part in a reading that another one conducts. */
export const helpUpload = defineJob({
  name: "help-upload",
  payload: z.object({ run: z.uuid(), seat: z.number().int().min(0) }),
  retries: 2,
  timeoutS: 4 * 3600,
  key: ({ run, seat }) => `${run}:${seat}`,
});
