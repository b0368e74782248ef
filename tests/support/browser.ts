import AxeBuilder from "@axe-core/playwright";
import { test as base, expect, type BrowserContext, type Page } from "@playwright/test";
import { encode } from "next-auth/jwt";
import { Client } from "pg";
import type { Role } from "@/domain/actor";

interface Fixtures {
  /** Signs a demo account in without the form, by the cookie that the form would have led to. */
  signIn: (role: Role) => Promise<void>;
  /** Fails the test with what axe finds on the page as it stands. */
  expectAccessible: () => Promise<void>;
}

export const test = base.extend<Fixtures>({
  signIn: async ({ context }, use) => {
    await use((role) => signInAs(context, role));
  },
  expectAccessible: async ({ page }, use) => {
    await use(() => checkAccess(page));
  },
});

export { expect };

export async function signInAs(context: BrowserContext, role: Role): Promise<void> {
  const url = process.env.E2E_URL ?? "";
  const value = await encode({
    token: { userId: await userIdOf(`${role}@varnmouth.example`), signedInAtMs: Date.now() },
    secret: process.env.NEXTAUTH_SECRET ?? "",
  });
  await context.addCookies([{ name: "tailmark-session", value, url, httpOnly: true, sameSite: "Lax" }]);
}

export async function userIdOf(email: string): Promise<string> {
  const [{ id }] = await onDatabase<{ id: string }>("select id from users where email = $1", [email]);
  return id;
}

/** One statement on the database of the running application. */
export async function onDatabase<R extends object>(statement: string, values: unknown[] = []): Promise<R[]> {
  const client = new Client({ connectionString: process.env.DATABASE_URL });
  await client.connect();
  try {
    return (await client.query<R>(statement, values)).rows;
  } finally {
    await client.end();
  }
}

async function checkAccess(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).withTags(["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"]).analyze();
  const found = violations.map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.target.join(" ")).join("; ")}`);
  expect(found, `accessibility of ${page.url()}`).toEqual([]);
}
