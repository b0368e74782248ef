import { chmodSync, mkdtempSync, rmSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { bundlePrograms, ensureWebBuild } from "@/ops/setup/build.mjs";
import { anyFreePort } from "@/ops/setup/ports.mjs";
import { startPostgres } from "@/ops/setup/postgres-server.mjs";
import { startProcess, waitForAnswer } from "@/ops/setup/processes.mjs";
import { step } from "@/ops/setup/progress.mjs";
import { run } from "@/ops/setup/run.mjs";

const ROOT = fileURLToPath(new URL("../..", import.meta.url)).replace(/\/$/, "");
const SECRET = "a-secret-for-browser-tests-and-nothing-else";

/** Web and worker on a database of their own, filled with the small part of the demo city. */
export default async function startServers(): Promise<() => Promise<void>> {
  const undo: (() => unknown)[] = [];
  const stop = async () => {
    for (const action of undo.reverse()) await action();
  };
  try {
    await start(undo);
  } catch (error) {
    await stop();
    throw error;
  }
  return stop;
}

async function start(undo: (() => unknown)[]): Promise<void> {
  const home = mkdtempSync(`/var/tmp/tailmark-test-${process.pid}-`);
  chmodSync(home, 0o711);
  undo.push(() => rmSync(home, { recursive: true, force: true }));
  const server = await startPostgres({ wanted: join(home, "postgres"), password: "test", volatile: true });
  undo.push(server.stop);

  const port = await anyFreePort();
  const baseUrl = `http://127.0.0.1:${port}`;
  const env = {
    TAILMARK_MODE: "test",
    DATABASE_URL: server.url,
    DATA_DIR: join(home, "data"),
    NEXTAUTH_SECRET: SECRET,
    BASE_URL: baseUrl,
    NEXTAUTH_URL: baseUrl,
    KEPT_MAIL_PORT: String(await anyFreePort()),
    DEMO_CITY: "small",
    NEXT_TELEMETRY_DISABLED: "1",
  };
  const programs = await bundlePrograms(ROOT);
  await step("Filling the test city", (say: (line: string) => void) =>
    run(process.execPath, ["--enable-source-maps", programs.prepare], { cwd: ROOT, env, onLine: say }),
  );
  await ensureWebBuild(ROOT);

  const print = (text: string) => {
    // Only what went wrong: the rest would drown the list of tests.
    if (/error|reference/i.test(text)) process.stderr.write(text);
  };
  const worker = startProcess(process.execPath, ["--enable-source-maps", programs.worker], { cwd: ROOT, env, print });
  undo.push(worker.stop);
  const next = join(ROOT, "node_modules/next/dist/bin/next");
  const web = startProcess(process.execPath, [next, "start", "-H", "127.0.0.1", "-p", String(port)], { cwd: ROOT, env: { ...env, NODE_ENV: "production" }, print });
  undo.push(web.stop);
  await waitForAnswer(`${baseUrl}/sign-in`, web);

  // Test processes are started after this and inherit it.
  Object.assign(process.env, env, { E2E_URL: baseUrl });
}
