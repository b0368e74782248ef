import { existsSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { SetupError } from "./run.mjs";

const LEFTOVER_MS = 10_000;

/** True when the process lives and is the one we mean: numbers of ended processes are used again. */
function isAlive({ pid, mark }) {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, "utf8").includes(mark);
  } catch {
    return false;
  }
}

/**
 * Keeps which processes run for this clone. Refuses a second start beside a living one, and ends what a start
 * that was killed left behind.
 */
export async function takeRun(dataDir) {
  const path = join(dataDir, "run.json");
  const record = existsSync(path) ? JSON.parse(readFileSync(path, "utf8")) : null;
  if (record && isAlive(record.start)) {
    throw new SetupError(`Tailmark runs already for this folder${record.address ? `, at ${record.address}` : ""} (process ${record.start.pid}). Stop that one first.`);
  }
  for (const child of record?.children ?? []) await endLeftover(child);

  const current = { start: { pid: process.pid, mark: "start.mjs" }, address: null, children: [] };
  const save = () => writeFileSync(path, JSON.stringify(current));
  save();
  return {
    noteChild(pid, mark) {
      current.children = [...current.children.filter((child) => child.mark !== mark), { pid, mark }];
      save();
    },
    noteAddress(address) {
      current.address = address;
      save();
    },
    end: () => rmSync(path, { force: true }),
  };
}

async function endLeftover(child) {
  if (!isAlive(child)) return;
  process.kill(child.pid, "SIGTERM");
  const deadline = Date.now() + LEFTOVER_MS;
  while (isAlive(child) && Date.now() < deadline) await sleep(100);
  if (isAlive(child)) process.kill(child.pid, "SIGKILL");
}
