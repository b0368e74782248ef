import { spawn } from "node:child_process";
import { once } from "node:events";
import { createInterface } from "node:readline";

const KEPT_LINES = 40;

/** A failure that a person can read as it stands: no stack is printed for it. */
export class SetupError extends Error {}

const running = new Set();

/** Ends the commands that still run, and waits for them: nothing may work on a database that is being stopped. */
export async function endRunning() {
  await Promise.all(
    [...running].map((child) => {
      child.kill("SIGTERM");
      return once(child, "close");
    }),
  );
}

/**
 * Runs a command to its end, quietly; its last lines are in the error when it fails.
 * `onLine` sees every line of its output as it comes; `what` names it to the person.
 */
export function run(command, args, { what, env, cwd, uid, gid, input, onLine } = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, {
      cwd,
      uid,
      gid,
      env: { ...process.env, NO_COLOR: "1", ...env },
      stdio: [input === undefined ? "ignore" : "pipe", "pipe", "pipe"],
    });
    running.add(child);
    for (const end of ["close", "error"]) child.on(end, () => running.delete(child));
    const lines = [];
    const keep = (line) => {
      lines.push(line);
      if (lines.length > KEPT_LINES) lines.shift();
      onLine?.(line);
    };
    createInterface({ input: child.stdout }).on("line", keep);
    createInterface({ input: child.stderr }).on("line", keep);
    if (input !== undefined) {
      child.stdin.on("error", () => undefined);
      child.stdin.end(input);
    }
    child.on("error", (error) => reject(new SetupError(`${command} cannot be run: ${error.message}`)));
    child.on("close", (code, signal) => {
      if (code === 0) resolve(lines);
      else reject(new SetupError(`${what ?? `${command} ${args[0] ?? ""}`} failed (${signal ?? `code ${code}`}).\n${lines.join("\n")}`));
    });
  });
}
