/** A worker's share of the bench in a process of its own, so that its memory can be told: URL FOLDER UPLOAD... */
import { ScreenQuery } from "@/domain/screen";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { rankJunctions } from "@/services/screens/rank-junctions";
import { openContext } from "./bench-place";

const [url, folder, ...uploadIds] = process.argv.slice(2);
const { ctx, close } = openContext(url, folder);
const startMs = Date.now();
for (const uploadId of uploadIds) await ingestUpload(ctx, { uploadId });
const { rows } = await rankJunctions(ctx, ScreenQuery.parse({ period: "all", days: "every" }));
const endMs = Date.now();
await close();
console.log(JSON.stringify({ startMs, endMs, peakMiB: process.resourceUsage().maxRSS / 1024, ranked: rows.filter((row) => row.rank !== null).length }));
