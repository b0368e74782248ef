import { readFile } from "node:fs/promises";
import { join } from "node:path";
import { step } from "./progress.mjs";
import { run } from "./run.mjs";

async function packagesIn(path) {
  try {
    return JSON.parse(await readFile(path, "utf8")).packages;
  } catch {
    return null;
  }
}

/** True when every package of the lock is there in its version; packages for other systems are left out. */
async function isInstalled(root) {
  const wanted = await packagesIn(join(root, "package-lock.json"));
  const present = await packagesIn(join(root, "node_modules/.package-lock.json"));
  if (!wanted || !present) return false;
  return Object.entries(wanted).every(
    ([path, entry]) => path === "" || entry.optional || entry.devOptional || entry.peer || present[path]?.version === entry.version,
  );
}

export async function ensurePackages(root) {
  if (await isInstalled(root)) return;
  // The build needs the type packages, whatever NODE_ENV says.
  await step("Installing packages", () => run("npm", ["ci", "--include=dev", "--no-audit", "--no-fund"], { cwd: root }));
}
