import { AppError } from "@/domain/errors";

const SAFE_METHODS = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * Refuses a change that a page of another site asks for with this person's cookie.
 * Browsers send at least one of the two headers with such a request; a client that sends neither is no browser.
 */
export function requireSameOrigin(request: Request): void {
  if (SAFE_METHODS.has(request.method)) return;
  const site = request.headers.get("sec-fetch-site");
  const origin = request.headers.get("origin");
  const host = request.headers.get("host");
  const isForeign = (site !== null && site !== "same-origin") || (origin !== null && hostOf(origin) !== host);
  if (isForeign) throw new AppError("forbidden", "This request came from another site and was refused.");
}

function hostOf(origin: string): string | null {
  try {
    return new URL(origin).host;
  } catch {
    return null;
  }
}
