import { constants, setPriority } from "node:os";
import { openDatabase } from "@/db/client";
import { env, keepsMail, smtpUrl } from "@/env";
import { openQueue } from "@/jobs/queue";
import { keptMailFolder } from "@/mail/kept-mail";
import { startMailKeeper, type MailKeeper } from "@/mail/mail-keeper";
import { openMailer } from "@/mail/mailer";
import type { Context } from "@/services/context";
import { openStorage, sweepStorage } from "@/storage/open-storage";
import { handlers } from "./handlers";
import { runJobs } from "./run-jobs";

/** A job's own lock, the lock of the legs, its transaction and its progress: fewer, and jobs wait for each other for ever. */
const CONNECTIONS_PER_JOB = 4;

const settings = env();
// On a machine that also serves pages, people go first.
setPriority(constants.priority.PRIORITY_BELOW_NORMAL);
const database = openDatabase(settings.DATABASE_URL, { max: handlers.length * settings.WORKER_CONCURRENCY * CONNECTIONS_PER_JOB });
const queue = openQueue(database.db);
const keptFolder = keepsMail(settings) ? keptMailFolder(settings.DATA_DIR) : null;
const mailer = openMailer({ smtpUrl: smtpUrl(settings), from: settings.MAIL_FROM, keptFolder });
const storage = openStorage(settings);

function contextFor(job: string): Context {
  return { actor: { type: "job", job }, db: database.db, now: new Date(), storage, queue, mailer, baseUrl: settings.BASE_URL, pieceRows: settings.INGEST_PIECE_ROWS };
}

/** A second worker on this machine uses the stand-in of the first. */
async function keepMail(folder: string): Promise<MailKeeper | null> {
  try {
    return await startMailKeeper(folder, settings.KEPT_MAIL_PORT);
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "EADDRINUSE") return null;
    throw error;
  }
}

const keeper = keptFolder === null ? null : await keepMail(keptFolder);
const runner = await runJobs({
  databaseUrl: settings.DATABASE_URL,
  pool: database.pool,
  handlers,
  concurrency: settings.WORKER_CONCURRENCY,
  contextFor,
});
console.log("Worker ready.");
await sweepStorage(settings, new Date()).catch((error: Error) => console.error("Sweep of the storage:", error.message));

let isStopping = false;
async function stop(): Promise<void> {
  if (isStopping) return;
  isStopping = true;
  await runner.stop();
  await queue.stop();
  mailer.close();
  await keeper?.close();
  await database.close();
  process.exit(0);
}
for (const signal of ["SIGTERM", "SIGINT"] as const) {
  process.on(signal, () => void stop().catch(() => process.exit(1)));
}
// The queue library does not wait for its own bookkeeping; a lost connection there is retried, not fatal.
process.on("unhandledRejection", (reason) => console.error("Worker:", reason));
