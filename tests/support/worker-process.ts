import { once } from "node:events";
import { spawn, type ChildProcess } from "node:child_process";
import { setTimeout as delay } from "node:timers/promises";
import { fileURLToPath } from "node:url";
import { bundlePrograms } from "@/ops/setup/build.mjs";
import { anyFreePort } from "@/ops/setup/ports.mjs";

const ROOT = fileURLToPath(new URL("../..", import.meta.url)).replace(/\/$/, "");
const READY_MS = 60_000;

export interface WorkerProcess {
  /** SIGKILL: it gets no chance to put anything in order. */
  kill(): Promise<void>;
  /** SIGTERM: it leaves off at a safe point. */
  stop(): Promise<void>;
  hasEnded(): boolean;
  /** What it wrote so far. */
  output(): string;
}

export interface WorkerPlace {
  databaseUrl: string;
  /** Its files lie in `storage` below this. */
  dataDir: string;
  /** Rows in a piece of work; the usual number where absent. */
  pieceRows?: number;
}

let program: Promise<string> | undefined;

/** The product's own second process on a test's database, once it says that it is ready. */
export async function startWorkerProcess({ databaseUrl, dataDir, pieceRows }: WorkerPlace): Promise<WorkerProcess> {
  program ??= bundlePrograms(ROOT).then((programs) => programs.worker);
  const env: NodeJS.ProcessEnv = {
    ...process.env,
    NODE_ENV: "production",
    TAILMARK_MODE: "test",
    DATABASE_URL: databaseUrl,
    DATA_DIR: dataDir,
    BASE_URL: "http://city.example",
    ...(pieceRows !== undefined && { INGEST_PIECE_ROWS: String(pieceRows) }),
    KEPT_MAIL_PORT: String(await anyFreePort()),
  };
  const child = spawn(process.execPath, ["--enable-source-maps", await program], { cwd: ROOT, env, stdio: ["ignore", "pipe", "pipe"] });
  let output = "";
  for (const stream of [child.stdout, child.stderr]) stream.on("data", (text) => (output += String(text)));
  const hasEnded = () => child.exitCode !== null || child.signalCode !== null;
  for (let waitedMs = 0; !output.includes("Worker ready."); waitedMs += 20) {
    if (hasEnded() || waitedMs > READY_MS) throw new Error(`The worker did not start.\n${output}`);
    await delay(20);
  }
  return { kill: () => end(child, "SIGKILL"), stop: () => end(child, "SIGTERM"), hasEnded, output: () => output };
}

async function end(child: ChildProcess, signal: NodeJS.Signals): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const exit = once(child, "exit");
  child.kill(signal);
  await exit;
}
