import { decode } from "next-auth/jwt";
import { cookies } from "next/headers";
import { z } from "zod";
import { env } from "@/env";

/** What the cookie says: who, and when they signed in. The role is read from the database each time. */
export const SessionClaims = z.object({ userId: z.uuid(), signedInAtMs: z.number() });
export type SessionClaims = z.infer<typeof SessionClaims>;

/** Browsers take the prefix only over HTTPS, where it keeps a neighbouring site from setting the cookie. */
export function sessionCookieName(baseUrl: string): string {
  return baseUrl.startsWith("https:") ? "__Host-tailmark-session" : "tailmark-session";
}

export async function readSession(now: Date): Promise<SessionClaims | null> {
  const jar = await cookies();
  const settings = env();
  const cookie = jar.get(sessionCookieName(settings.BASE_URL))?.value;
  if (!cookie) return null;
  try {
    const claims = SessionClaims.safeParse(await decode({ token: cookie, secret: settings.NEXTAUTH_SECRET }));
    // Counted from the sign-in itself, so that a cookie that is renewed does not live for ever.
    const isOver = !claims.success || now.getTime() - claims.data.signedInAtMs > settings.SESSION_HOURS * 3_600_000;
    return isOver ? null : claims.data;
  } catch {
    // Signed with another secret, or not ours at all.
    return null;
  }
}
