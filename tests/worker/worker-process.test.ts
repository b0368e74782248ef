import { spawn, type ChildProcess } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { sql } from "drizzle-orm";
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from "vitest";
import { sendPasswordMail } from "@/jobs/definitions/send-password-mail";
import { listKeptMail, keptMailFolder } from "@/mail/kept-mail";
import { anyFreePort } from "@/ops/setup/ports.mjs";
import { invitePerson } from "@/services/users/invite-person";
import { testContext, testPlace } from "@tests/support/database";

let dataDir: string;
const started: ChildProcess[] = [];

beforeAll(async () => {
  dataDir = await mkdtemp(join(tmpdir(), "tailmark-worker-"));
});

afterEach(() => {
  for (const child of started.splice(0)) child.kill("SIGKILL");
});

afterAll(() => rm(dataDir, { recursive: true, force: true }));

/** The real worker, as a process of its own; resolves once it says that it is ready. */
async function startWorker(): Promise<ChildProcess> {
  const env = {
    ...process.env,
    TAILMARK_MODE: "test",
    DATABASE_URL: (await testPlace()).url,
    DATA_DIR: dataDir,
    KEPT_MAIL_PORT: String(await anyFreePort()),
    BASE_URL: "http://city.example",
  };
  const child = spawn(process.execPath, ["--import", "tsx", "src/worker/main.ts"], { env, stdio: ["ignore", "pipe", "pipe"] });
  started.push(child);
  let output = "";
  child.stdout.on("data", (text) => (output += text));
  child.stderr.on("data", (text) => (output += text));
  await vi.waitFor(() => expect(output).toContain("Worker ready."), 30_000);
  return child;
}

async function mailTo(email: string): Promise<string | undefined> {
  return (await listKeptMail(keptMailFolder(dataDir), 100)).find((mail) => mail.to === email)?.text;
}

describe("the worker's process", () => {
  it("starts, does what is queued, and ends cleanly when it is told to", async () => {
    const worker = await startWorker();
    await invitePerson(await testContext("admin"), { email: "first@test.example", name: "First", role: "reader" });
    await vi.waitFor(async () => expect(await mailTo("first@test.example")).toContain("http://city.example/set-password?token="), 15_000);
    const exit = once(worker, "exit");
    worker.kill("SIGTERM");
    expect(await exit).toEqual([0, null]);
  });

  it("that is killed leaves its jobs to the next one", async () => {
    const admin = await testContext("admin");
    const first = await startWorker();
    const exit = once(first, "exit");
    first.kill("SIGKILL");
    await exit;
    await invitePerson(admin, { email: "second@test.example", name: "Second", role: "reader" });
    // As if the kill had come in the middle of the job.
    await admin.db.execute(sql`update pgboss.job set state = 'active', started_on = now() - interval '1 minute' where name = ${sendPasswordMail.name} and state = 'created'`);
    await startWorker();
    await vi.waitFor(async () => expect(await mailTo("second@test.example")).toContain("Good day Second,"), 30_000);
  });
});
