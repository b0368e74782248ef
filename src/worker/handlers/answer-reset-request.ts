import { answerResetRequest as job } from "@/jobs/definitions/answer-reset-request";
import { answerResetRequest } from "@/services/auth/answer-reset-request";
import { handler } from "../handler";

export const answerResetRequestHandler = handler(job, answerResetRequest);
