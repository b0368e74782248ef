/**
 * `npm start`, and with --dev `npm run dev`: from a fresh clone to a running city.
 * Plain Node: it runs before any package is installed.
 */
import { availableParallelism } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { bundlePrograms, ensureWebBuild, placeMapWorker } from "./setup/build.mjs";
import { ensurePackages } from "./setup/packages.mjs";
import { anyFreePort, freePortFrom } from "./setup/ports.mjs";
import { startPostgres } from "./setup/postgres-server.mjs";
import { startProcess, waitForAnswer, WORKER_OPTIONS } from "./setup/processes.mjs";
import { step } from "./setup/progress.mjs";
import { endRunning, run, SetupError } from "./setup/run.mjs";
import { takeRun } from "./setup/run-record.mjs";
import { cloneSecrets } from "./setup/secrets.mjs";

const root = fileURLToPath(new URL("../..", import.meta.url)).replace(/\/$/, "");
const isDev = process.argv.includes("--dev");
const dataDir = process.env.DATA_DIR || join(root, ".data");
const host = process.env.HOST || "127.0.0.1";
const WORKER_RESTARTS = 5;
/** Worker processes where WORKERS says nothing: they share a large file, and pages and database want their turn too. */
const MOST_WORKERS = 2;

/** What is to be undone at the end, last first. */
const undo = [];
let isStopping = false;

async function stop(code) {
  if (isStopping) return;
  isStopping = true;
  if (undo.length > 1) process.stdout.write("\nStopping.\n");
  await endRunning();
  for (const action of undo.reverse()) {
    await Promise.resolve(action()).catch((error) => console.error(error.message));
  }
  process.exit(code);
}

for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"]) process.on(signal, () => void stop(0));

function modeOf() {
  if (process.env.TAILMARK_MODE) return process.env.TAILMARK_MODE;
  return process.env.NODE_ENV === "production" ? "production" : "demo";
}

async function settingsFor(mode, secrets, databaseUrl) {
  const port = await freePortFrom(Number(process.env.PORT) || 3000, host);
  const shownHost = host === "0.0.0.0" || host === "::" ? "127.0.0.1" : host;
  const baseUrl = process.env.BASE_URL || `http://${shownHost}:${port}`;
  const env = {
    TAILMARK_MODE: mode,
    DATABASE_URL: databaseUrl,
    DATA_DIR: dataDir,
    NEXT_TELEMETRY_DISABLED: "1",
    KEPT_MAIL_PORT: process.env.KEPT_MAIL_PORT || String(await anyFreePort()),
    // Production names its own secret and address or is refused; elsewhere each clone has them.
    ...(mode !== "production" && { NEXTAUTH_SECRET: process.env.NEXTAUTH_SECRET || secrets.session, BASE_URL: baseUrl }),
  };
  return { port, baseUrl, env, readyUrl: `http://${shownHost}:${port}/sign-in` };
}

function workersWanted() {
  const given = process.env.WORKERS;
  // With reload on change one is enough.
  if (!given) return isDev ? 1 : Math.min(MOST_WORKERS, availableParallelism());
  const count = Number(given);
  if (!Number.isInteger(count) || count < 1) throw new SetupError(`WORKERS=${given} is no number of worker processes from 1 on.`);
  return count;
}

function startWorker(name, record, programs, env) {
  let restarts = 0;
  let child;
  const start = () => {
    const args = isDev ? ["--import", "tsx", "--watch-path=src", "--watch-preserve-output", "src/worker/main.ts"] : ["--enable-source-maps", ...WORKER_OPTIONS, programs.worker];
    child = startProcess(process.execPath, args, { cwd: root, env, print: printFrom(name) });
    record.noteChild(name, child.pid);
    void child.ended.then((how) => {
      if (isStopping) return;
      restarts += 1;
      if (restarts > WORKER_RESTARTS) {
        console.error(`The ${name} ended ${restarts} times, the last time with ${how}.`);
        void stop(1);
      } else {
        console.error(`The ${name} ended (${how}); starting it again.`);
        setTimeout(() => isStopping || start(), 1000 * restarts);
      }
    });
  };
  start();
  undo.push(() => child.stop());
}

async function startWeb(record, { env, port, readyUrl }) {
  const next = join(root, "node_modules/next/dist/bin/next");
  const args = [next, isDev ? "dev" : "start", "-H", host, "-p", String(port)];
  const child = startProcess(process.execPath, args, { cwd: root, env: isDev ? env : { ...env, NODE_ENV: "production" }, print: printFrom("web") });
  record.noteChild("web", child.pid);
  undo.push(() => child.stop());
  await step("Starting the pages", () => waitForAnswer(readyUrl, child));
  void child.ended.then((how) => {
    if (isStopping) return;
    console.error(`The web server ended (${how}).`);
    void stop(1);
  });
}

/** Start-up chatter is dropped; what comes later, and anything that speaks of an error, is shown. */
function printFrom(name) {
  return (text) => {
    for (const line of text.split("\n")) {
      const isChatter = /^\s*($|▲|✓|- (Local|Network):|Worker ready)/u.test(line);
      if (!isChatter) process.stdout.write(`${name}: ${line}\n`);
    }
  };
}

async function prepare(programs, env) {
  const lines = [];
  await step("Preparing the data", (say) =>
    run(process.execPath, ["--enable-source-maps", programs.prepare], {
      what: "Preparing the data",
      cwd: root,
      env,
      onLine(line) {
        if (line.startsWith("> ")) lines.push(line.slice(2));
        else say(line);
      },
    }),
  );
  return lines;
}

async function main() {
  const mode = modeOf();
  const workers = workersWanted();
  await ensurePackages(root);
  const secrets = cloneSecrets(dataDir);
  const record = await takeRun(dataDir, root);
  undo.push(() => record.end());

  let databaseUrl = process.env.DATABASE_URL;
  if (!databaseUrl) {
    const server = await startPostgres({ wanted: join(dataDir, "postgres"), password: secrets.database });
    undo.push(() => server.stop());
    databaseUrl = server.url;
  }

  const settings = await settingsFor(mode, secrets, databaseUrl);
  const programs = await bundlePrograms(root);
  placeMapWorker(root);
  // One waits for the database, the other for the compiler: side by side they take little longer than the longer one.
  const [closingLines] = await Promise.all([prepare(programs, settings.env), isDev || ensureWebBuild(root)]);
  await startWeb(record, settings);
  for (let n = 1; n <= workers; n++) startWorker(n === 1 ? "worker" : `worker ${n}`, record, programs, settings.env);
  record.noteAddress(settings.baseUrl);

  console.log(`\nTailmark runs at ${settings.baseUrl}`);
  for (const line of closingLines) console.log(line);
  console.log("Ctrl-C stops it.");
}

main().catch((error) => {
  if (isStopping) return;
  console.error(error instanceof SetupError ? error.message : error);
  void stop(1);
});
