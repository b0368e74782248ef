import { answerResetRequestHandler } from "./answer-reset-request";
import type { Handler } from "../handler";
import { helpUploadHandler } from "./help-upload";
import { ingestUploadHandler } from "./ingest-upload";
import { reprocessLegsHandler } from "./reprocess-legs";
import { sendPasswordMailHandler } from "./send-password-mail";
import { sendUploadMailHandler } from "./send-upload-mail";

export const handlers: readonly Handler[] = [answerResetRequestHandler, helpUploadHandler, ingestUploadHandler, reprocessLegsHandler, sendPasswordMailHandler, sendUploadMailHandler];
