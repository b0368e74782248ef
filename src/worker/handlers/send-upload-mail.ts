import { sendUploadMail as job } from "@/jobs/definitions/send-upload-mail";
import { sendUploadMail } from "@/services/uploads/send-upload-mail";
import { handler } from "../handler";

export const sendUploadMailHandler = handler(job, sendUploadMail);
