import { ingestUpload as job } from "@/jobs/definitions/ingest-upload";
import { giveUpUpload, ingestUpload } from "@/services/ingest/ingest-upload";
import { handler } from "../handler";

export const ingestUploadHandler = handler(job, ingestUpload, giveUpUpload);
