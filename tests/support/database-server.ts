import { chmodSync, mkdtempSync, readdirSync, rmSync } from "node:fs";
import { join } from "node:path";
import type { TestProject } from "vitest/node";
import { migrateDatabase } from "@/ops/migrate-database";
import { startPostgres } from "@/ops/setup/postgres-server.mjs";
import { createDatabase, urlOf } from "./databases";

declare module "vitest" {
  interface ProvidedContext {
    templateUrl: string;
  }
}

const PARENT = "/var/tmp";
const PREFIX = "tailmark-test-";

/** One server for the run, with a database that is migrated once and copied for each test file. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  removeLeftovers();
  const home = mkdtempSync(join(PARENT, `${PREFIX}${process.pid}-`));
  // The account that the server runs under passes through it.
  chmodSync(home, 0o711);
  const server = await startPostgres({ wanted: join(home, "postgres"), password: "test", volatile: true });
  const templateUrl = urlOf(server.url, "tailmark_template");
  await createDatabase(server.url, "tailmark_template");
  await migrateDatabase(templateUrl, "drizzle");
  project.provide("templateUrl", templateUrl);
  return async () => {
    await server.stop();
    rmSync(home, { recursive: true, force: true });
  };
}

/** Folders of runs that were killed. */
function removeLeftovers(): void {
  for (const name of readdirSync(PARENT)) {
    const pid = new RegExp(`^${PREFIX}(\\d+)-`).exec(name)?.[1];
    if (pid && !isAlive(Number(pid))) rmSync(join(PARENT, name), { recursive: true, force: true });
  }
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch {
    return false;
  }
}
