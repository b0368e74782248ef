import { answerResetRequest } from "./answer-reset-request";
import { helpUpload } from "./help-upload";
import { ingestUpload } from "./ingest-upload";
import { reprocessLegs } from "./reprocess-legs";
import { sendPasswordMail } from "./send-password-mail";
import { sendUploadMail } from "./send-upload-mail";

/** Every queue of the installation; a job that is not listed here cannot be queued. */
export const JOBS = [answerResetRequest, helpUpload, ingestUpload, reprocessLegs, sendPasswordMail, sendUploadMail] as const;
