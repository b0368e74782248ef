/** Run before web and worker: tables, queues, first accounts, demo city. Lines that begin with "> " are for the person who started it. */
import { openDatabase } from "@/db/client";
import { env, type Env } from "@/env";
import { openQueue } from "@/jobs/queue";
import { readOutdatedAgain } from "@/services/uploads/read-outdated-again";
import { inviteFirstAdmin, seedDemoAccounts } from "./accounts";
import { migrateDatabase } from "./migrate-database";
import { seedCity } from "./seed";

const settings = readSettings();
await migrateDatabase(settings.DATABASE_URL, "drizzle");
const database = openDatabase(settings.DATABASE_URL, { max: 4 });
try {
  const say = (line: string) => console.log(line);
  const queue = openQueue(database.db);
  const again = await readOutdatedAgain({ actor: { type: "job", job: "new method" }, db: database.db, now: new Date(), queue }).finally(() => queue.stop());
  if (again > 0) say(`> The method has changed: ${again === 1 ? "1 file is" : `${again} files are`} read in again. Their days are missing until then.`);
  if (settings.TAILMARK_MODE === "production") {
    for (const line of await inviteFirstAdmin(database.db, settings)) say(`> ${line}`);
  } else {
    const accounts = await seedDemoAccounts(database.db);
    await seedCity({ database, settings, say });
    for (const account of accounts) say(`> ${account.role.padEnd(10)}  ${account.email}  ${account.password}`);
  }
} finally {
  await database.close();
}

/** A setting that is missing or wrong is told in its sentence; where in the code it was noticed helps nobody. */
function readSettings(): Env {
  try {
    return env();
  } catch (error) {
    console.error(error instanceof Error ? error.message : error);
    process.exit(1);
  }
}
