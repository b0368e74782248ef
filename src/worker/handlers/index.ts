import type { Handler } from "../handler";
import { ingestUploadHandler } from "./ingest-upload";
import { sendPasswordMailHandler } from "./send-password-mail";
import { sendUploadMailHandler } from "./send-upload-mail";

export const handlers: readonly Handler[] = [ingestUploadHandler, sendPasswordMailHandler, sendUploadMailHandler];
