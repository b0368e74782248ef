import { answerResetRequestHandler } from "./answer-reset-request";
import type { Handler } from "../handler";
import { ingestUploadHandler } from "./ingest-upload";
import { reprocessLegsHandler } from "./reprocess-legs";
import { sendPasswordMailHandler } from "./send-password-mail";
import { sendUploadMailHandler } from "./send-upload-mail";

export const handlers: readonly Handler[] = [answerResetRequestHandler, ingestUploadHandler, reprocessLegsHandler, sendPasswordMailHandler, sendUploadMailHandler];
