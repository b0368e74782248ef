import { randomUUID } from "node:crypto";
import { z } from "zod";
import { AppError, type ErrorCode, type Problem } from "@/domain/errors";

/** The only place where a thrown value becomes words for a person. */
export function toProblem(error: unknown): Problem {
  if (error instanceof AppError && error.code !== "internal") {
    return { code: error.code, message: error.message, ...(error.fieldErrors && { fieldErrors: error.fieldErrors }) };
  }
  if (error instanceof z.ZodError) {
    return { code: "invalid", message: firstSentence(error), fieldErrors: z.flattenError(error).fieldErrors };
  }
  return { code: "internal", message: `Something went wrong. Reference ${reportBug(error)}.` };
}

export const STATUS_OF_CODE: Record<ErrorCode, number> = {
  invalid: 400,
  unauthenticated: 401,
  forbidden: 403,
  not_found: 404,
  conflict: 409,
  too_many: 429,
  full: 507,
  internal: 500,
};

function firstSentence(error: z.ZodError): string {
  const [issue] = error.issues;
  const where = issue.path.join(".");
  return where ? `Check ${where}: ${issue.message}` : issue.message;
}

/** Writes the cause to the log under a short reference that the person can quote. */
function reportBug(error: unknown): string {
  const reference = randomUUID().slice(0, 8);
  console.error(`Reference ${reference}:`, error);
  return reference;
}
