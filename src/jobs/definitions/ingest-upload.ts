import { z } from "zod";
import { defineJob } from "../job";

export const ingestUpload = defineJob({
  name: "ingest-upload",
  payload: z.object({ uploadId: z.uuid() }),
  retries: 2,
  // Ten million rows take minutes; a supplier's month of them must not run into the limit.
  timeoutS: 4 * 3600,
  // One ingest per upload, however often the button is pressed.
  key: ({ uploadId }) => uploadId,
});
