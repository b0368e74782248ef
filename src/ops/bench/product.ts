import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { openDatabase } from "@/db/client";
import type { Role } from "@/domain/actor";
import { DEMO_ACCOUNTS, seedDemoAccounts } from "../accounts";
import { bundlePrograms, ensureWebBuild } from "../setup/build.mjs";
import { anyFreePort } from "../setup/ports.mjs";
import { startProcess, waitForAnswer } from "../setup/processes.mjs";

const ROOT = fileURLToPath(new URL("../../..", import.meta.url)).replace(/\/$/, "");
const SECRET = "a-secret-for-the-bench-and-nothing-else";
/** Where the bench itself runs under a profiler, its servers do. */
const PROFILER = process.execArgv.filter((option) => option.startsWith("--cpu-prof"));
/** As the server names it over plain HTTP. */
export const SESSION_COOKIE = "tailmark-session";

/** The pages as a city runs them: a production build in a process of its own, on a database that is filled already. */
export interface Product {
  baseUrl: string;
  /** Value of the session cookie of the demo account with the role, who signs in once. */
  sessionOf(role: Role): Promise<string>;
  startWorker(): Promise<void>;
  stop(): Promise<void>;
}

export async function startProduct(databaseUrl: string, folder: string): Promise<Product> {
  await ensureWebBuild(ROOT);
  await makeAccounts(databaseUrl);
  const port = await anyFreePort();
  const baseUrl = `http://127.0.0.1:${port}`;
  const env = {
    TAILMARK_MODE: "test",
    DATABASE_URL: databaseUrl,
    DATA_DIR: folder,
    NEXTAUTH_SECRET: SECRET,
    BASE_URL: baseUrl,
    NEXTAUTH_URL: baseUrl,
    KEPT_MAIL_PORT: String(await anyFreePort()),
    NEXT_TELEMETRY_DISABLED: "1",
    NODE_ENV: "production",
  };
  const next = join(ROOT, "node_modules/next/dist/bin/next");
  const web = startProcess(process.execPath, [...PROFILER, next, "start", "-H", "127.0.0.1", "-p", String(port)], { cwd: ROOT, env, print });
  const running = [web];
  const sessions: Partial<Record<Role, Promise<string>>> = {};
  await waitForAnswer(`${baseUrl}/sign-in`, web);
  return {
    baseUrl,
    sessionOf: (role) => (sessions[role] ??= signIn(baseUrl, role)),
    async startWorker() {
      const { worker } = await bundlePrograms(ROOT);
      running.push(startProcess(process.execPath, [...PROFILER, "--enable-source-maps", worker], { cwd: ROOT, env, print }));
    },
    async stop() {
      for (const child of running.reverse()) await child.stop();
    },
  };
}

async function makeAccounts(databaseUrl: string): Promise<void> {
  const { db, close } = openDatabase(databaseUrl, { max: 1 });
  try {
    await seedDemoAccounts(db);
  } finally {
    await close();
  }
}

/** By the two requests that the sign-in form sends. */
async function signIn(baseUrl: string, role: Role): Promise<string> {
  const account = DEMO_ACCOUNTS.find((one) => one.role === role);
  const asked = await fetch(`${baseUrl}/api/auth/csrf`);
  const { csrfToken } = (await asked.json()) as { csrfToken: string };
  const answer = await fetch(`${baseUrl}/api/auth/callback/credentials`, {
    method: "POST",
    redirect: "manual",
    headers: { cookie: asked.headers.getSetCookie().map((cookie) => cookie.split(";")[0]).join("; ") },
    body: new URLSearchParams({ csrfToken, email: account?.email ?? "", password: account?.password ?? "", json: "true" }),
  });
  const session = answer.headers.getSetCookie().find((cookie) => cookie.startsWith(`${SESSION_COOKIE}=`));
  if (!session) throw new Error(`The ${role} could not sign in: status ${answer.status}.`);
  return session.split(";")[0].slice(SESSION_COOKIE.length + 1);
}

/** Only what went wrong: on the output of the bench stand its figures. */
function print(text: string): void {
  if (/error|reference/i.test(text)) process.stderr.write(text);
}
