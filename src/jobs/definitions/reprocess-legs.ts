import { z } from "zod";
import { defineJob } from "../job";

/** Matches the pings around a junction anew after an engineer changed its legs. */
export const reprocessLegs = defineJob({
  name: "reprocess-legs",
  payload: z.object({ junctionId: z.number().int().positive() }),
  retries: 2,
  timeoutS: 4 * 3600,
  // Several changes in a row wait for one run.
  key: ({ junctionId }) => String(junctionId),
});
