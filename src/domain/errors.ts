export const ERROR_CODES = ["invalid", "unauthenticated", "forbidden", "not_found", "conflict", "too_many", "full", "internal"] as const;
export type ErrorCode = (typeof ERROR_CODES)[number];

/** A refusal that a person may read: the message is a sentence that says what and where. */
export class AppError extends Error {
  constructor(
    readonly code: ErrorCode,
    message: string,
    options?: { cause?: unknown; fieldErrors?: Record<string, string[]> },
  ) {
    super(message, { cause: options?.cause });
    this.name = "AppError";
    this.fieldErrors = options?.fieldErrors;
  }
  readonly fieldErrors?: Record<string, string[]>;
}

export function notFound(what: string, id: string | number): AppError {
  return new AppError("not_found", `${what} ${id} does not exist.`);
}

/** What reaches a person when a request fails. */
export interface Problem {
  code: ErrorCode;
  message: string;
  fieldErrors?: Record<string, string[]>;
}

export type ActionResult<T> = { ok: true; data: T } | ({ ok: false } & Problem);
