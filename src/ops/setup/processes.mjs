import { spawn } from "node:child_process";
import { once } from "node:events";
import { setTimeout as sleep } from "node:timers/promises";
import { SetupError } from "./run.mjs";

const STOP_MS = 20_000;

/** Of node in a worker: room for what columns leave behind spares a twelfth of its time, for 100 MB. */
export const WORKER_OPTIONS = ["--max-semi-space-size=64"];

/**
 * Starts a lasting process in a group of its own, so that Ctrl-C reaches it through us, in order, and once.
 * `print` gets each piece of what it writes.
 */
export function startProcess(command, args, { env, cwd, print }) {
  const child = spawn(command, args, { cwd, env: { ...process.env, ...env }, stdio: ["ignore", "pipe", "pipe"], detached: true });
  child.stdout.on("data", (text) => print(String(text)));
  child.stderr.on("data", (text) => print(String(text)));
  const hasEnded = () => child.exitCode !== null || child.signalCode !== null;
  return {
    pid: child.pid,
    hasEnded,
    ended: new Promise((resolve) => child.once("exit", (code, signal) => resolve(signal ?? `code ${code}`))),
    async stop() {
      if (hasEnded()) return;
      const exit = once(child, "exit");
      signalGroup(child.pid, "SIGTERM");
      const won = await Promise.race([exit.then(() => true), sleep(STOP_MS, false, { ref: false })]);
      if (!won) signalGroup(child.pid, "SIGKILL");
    },
  };
}

function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal);
  } catch {
    // Gone already.
  }
}

/** Waits until the address answers below 500; fails at once when the process ends before. */
export async function waitForAnswer(url, child, timeoutMs = 120_000) {
  const deadline = Date.now() + timeoutMs;
  let last = "no answer";
  while (Date.now() < deadline) {
    if (child.hasEnded()) throw new SetupError(`The web server ended while starting (${await child.ended}).`);
    try {
      const response = await fetch(url, { redirect: "manual", signal: AbortSignal.timeout(20_000) });
      if (response.status < 500) return;
      last = `status ${response.status}`;
    } catch (error) {
      last = error.cause?.code ?? error.name;
    }
    await sleep(150);
  }
  throw new SetupError(`The web server did not answer at ${url} (${last}).`);
}
