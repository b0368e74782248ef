import { AppError } from "@/domain/errors";

/** The whole file cannot be used: a sentence for the person who sent it. */
export function unusable(sentence: string, cause?: unknown): AppError {
  return new AppError("invalid", sentence, { cause });
}
