import { AppError } from "@/domain/errors";

/** A full disk and a used-up quota, as the system calls report them; PostgreSQL's disk_full. */
const FULL_CODES = new Set(["ENOSPC", "EDQUOT", "53100"]);
const MAX_CAUSES = 5;

/** A full disk, wherever it was met, as a sentence for the person whose file did not fit; any other error as it is. */
export function orNoRoom(error: unknown): unknown {
  let cause = error;
  for (let i = 0; i < MAX_CAUSES && cause instanceof Error && !(cause instanceof AppError); i++) {
    if ("code" in cause && FULL_CODES.has(String(cause.code))) {
      return new AppError("full", "There is no room left for files on the server, so nothing of this one was kept. Ask your administrator to make room, then try again.", { cause: error });
    }
    cause = cause.cause;
  }
  return error;
}
