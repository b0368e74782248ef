import { z } from "zod";
import { defineJob } from "../job";

/** Matches the pings around junctions anew after an engineer or a file of drawn lines changed their legs. */
export const reprocessLegs = defineJob({
  name: "reprocess-legs",
  payload: z.object({ junctionIds: z.array(z.number().int().positive()).min(1) }),
  retries: 2,
  timeoutS: 4 * 3600,
  // Several changes in a row wait for one run.
  key: ({ junctionIds }) => [...junctionIds].sort((a, b) => a - b).join(),
});
