import { createHash, randomBytes } from "node:crypto";

/** 256 bits, too many to guess; safe in an address. */
export function newToken(): string {
  return randomBytes(32).toString("base64url");
}

/** What the database keeps: whoever reads it there cannot use it. */
export function hashToken(token: string): string {
  return createHash("sha256").update(token).digest("hex");
}
