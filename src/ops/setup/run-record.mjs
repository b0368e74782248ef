import { existsSync, readFileSync, readlinkSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { SetupError } from "./run.mjs";

const LEFTOVER_MS = 10_000;

/**
 * True when the process lives and is the one we mean: numbers of ended processes are used again.
 * It is known by its folder, since the web server changes how its command line reads.
 */
function isAlive(pid, folder) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`) === folder;
  } catch {
    return false;
  }
}

/**
 * Keeps which processes run for this clone. Refuses a second start beside a living one, and ends what a start
 * that was killed left behind.
 */
export async function takeRun(dataDir, root) {
  // Also when it was called by path from elsewhere: the next start looks for it here.
  process.chdir(root);
  const path = join(dataDir, "run.json");
  const record = existsSync(path) ? JSON.parse(readFileSync(path, "utf8")) : null;
  if (record && isAlive(record.start, root)) {
    throw new SetupError(`Tailmark runs already for this folder${record.address ? `, at ${record.address}` : ""} (process ${record.start}). Stop that one first.`);
  }
  for (const pid of Object.values(record?.children ?? {})) await endLeftover(pid, root);

  const current = { start: process.pid, address: null, children: {} };
  const save = () => writeFileSync(path, JSON.stringify(current));
  save();
  return {
    noteChild(name, pid) {
      current.children[name] = pid;
      save();
    },
    noteAddress(address) {
      current.address = address;
      save();
    },
    end: () => rmSync(path, { force: true }),
  };
}

async function endLeftover(pid, root) {
  if (!isAlive(pid, root)) return;
  process.kill(pid, "SIGTERM");
  const deadline = Date.now() + LEFTOVER_MS;
  while (isAlive(pid, root) && Date.now() < deadline) await sleep(100);
  if (isAlive(pid, root)) process.kill(pid, "SIGKILL");
}
