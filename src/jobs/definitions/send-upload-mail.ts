import { z } from "zod";
import { defineJob } from "../job";

/** Tells the person who uploaded a file that it is in, or why it is not. */
export const sendUploadMail = defineJob({
  name: "send-upload-mail",
  payload: z.object({ uploadId: z.uuid() }),
  retries: 5,
  timeoutS: 60,
  key: ({ uploadId }) => uploadId,
});
