/** A worker of the bench in a process of its own, so that its memory can be told: URL FOLDER. It works until it is told to stop. */
import { helpUploadHandler } from "@/worker/handlers/help-upload";
import { ingestUploadHandler } from "@/worker/handlers/ingest-upload";
import { runJobs } from "@/worker/run-jobs";
import { openContext } from "./bench-place";

const [url, folder] = process.argv.slice(2);
const { ctx, database, close } = openContext(url, folder);
const runner = await runJobs({
  databaseUrl: url,
  pool: database.pool,
  handlers: [ingestUploadHandler, helpUploadHandler],
  concurrency: 1,
  contextFor: () => ({ ...ctx, now: new Date() }),
});
const begun = process.cpuUsage();
process.once("SIGTERM", () => void stop());
console.log("ready");

async function stop(): Promise<void> {
  await runner.stop();
  await close();
  const { user, system } = process.cpuUsage(begun);
  console.log(JSON.stringify({ peakMiB: process.resourceUsage().maxRSS / 1024, cpuS: (user + system) / 1e6 }));
  process.exit(0);
}
