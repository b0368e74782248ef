import { ingestUpload } from "./ingest-upload";
import { sendPasswordMail } from "./send-password-mail";
import { sendUploadMail } from "./send-upload-mail";

/** Every queue of the installation; a job that is not listed here cannot be queued. */
export const JOBS = [ingestUpload, sendPasswordMail, sendUploadMail] as const;
