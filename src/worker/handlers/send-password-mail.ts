import { sendPasswordMail as job } from "@/jobs/definitions/send-password-mail";
import { sendPasswordMail } from "@/services/auth/send-password-mail";
import { handler } from "../handler";

export const sendPasswordMailHandler = handler(job, sendPasswordMail);
