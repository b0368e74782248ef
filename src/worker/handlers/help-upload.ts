import { helpUpload as job } from "@/jobs/definitions/help-upload";
import { helpUpload } from "@/services/ingest/help-upload";
import { handler } from "../handler";

export const helpUploadHandler = handler(job, helpUpload);
