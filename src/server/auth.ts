import type { AuthOptions } from "next-auth";
import Credentials from "next-auth/providers/credentials";
import { env } from "@/env";
import { signIn } from "@/services/auth/sign-in";
import { addressFrom } from "./client-address";
import { PEER_HEADER } from "./peer-header";
import { contextOf } from "./runtime";
import { sessionCookieName } from "./session";

/** Built on first use, so that a build needs no environment. */
export function authOptions(): AuthOptions {
  const settings = env();
  const isHttps = settings.BASE_URL.startsWith("https:");
  return {
    secret: settings.NEXTAUTH_SECRET,
    session: { strategy: "jwt", maxAge: settings.SESSION_HOURS * 3600 },
    pages: { signIn: "/sign-in", error: "/sign-in" },
    useSecureCookies: isHttps,
    cookies: {
      sessionToken: {
        name: sessionCookieName(settings.BASE_URL),
        options: { httpOnly: true, sameSite: "lax", path: "/", secure: isHttps },
      },
    },
    providers: [
      Credentials({
        credentials: { email: { type: "email" }, password: { type: "password" } },
        async authorize(given, request) {
          const ctx = contextOf({ type: "nobody" });
          const address = addressFrom({ forwardedFor: request.headers?.["x-forwarded-for"], peer: request.headers?.[PEER_HEADER] }, settings.TRUSTED_PROXIES);
          const person = await signIn(ctx, { email: given?.email ?? "", password: given?.password ?? "", address });
          return person && { id: person.userId, name: person.name, email: person.email };
        },
      }),
    ],
    callbacks: {
      jwt: ({ token, user }) => (user ? { userId: user.id, signedInAtMs: Date.now() } : token),
      // Pages read the person from the database; the browser needs to know nothing of the session.
      session: ({ session }) => ({ expires: session.expires }),
    },
  };
}
