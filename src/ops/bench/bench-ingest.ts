import { spawn } from "node:child_process";
import { createReadStream } from "node:fs";
import { basename, join } from "node:path";
import { pipeline } from "node:stream/promises";
import { fileURLToPath } from "node:url";
import { eq } from "drizzle-orm";
import { from as copyFrom } from "pg-copy-streams";
import { uploads } from "@/db/schema";
import type { UploadKind } from "@/domain/upload";
import type { Context } from "@/services/context";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { PING_START_MS } from "./bench-parse";
import { openContext, type BenchPlace, type OpenContext } from "./bench-place";
import { figure, secondsSince, type Figure } from "./figures";
import { writeJunctions, writePings } from "./traffic";

const MEMORY_BOUND_MIB = 1024;
const DAY_MS = 86_400_000;

interface Run {
  startMs: number;
  endMs: number;
  peakMiB: number;
  ranked: number;
}

/** File on disk to ranked screen in a worker's process, beside a bare COPY of the same bytes. */
export async function benchIngest(place: BenchPlace, rows: number): Promise<Figure[]> {
  const file = join(place.folder, "pings.csv");
  await writePings(file, rows, 2, PING_START_MS);
  const { url, uploadIds } = await cityWith(place, "ingest", [file]);
  const copyS = await bareCopy(url, place.folder, file);
  const run = await ingestIn(url, place.folder, uploadIds);
  await requireDone(url, place.folder, uploadIds, run);
  return [
    figure("ingest, file to ranked screen", secondsOf([run]), "s", "bare COPY into one logged table", copyS),
    figure("ingest, peak memory of the worker", run.peakMiB, "MiB", "bound", MEMORY_BOUND_MIB),
  ];
}

/** Two files by two workers at once, beside the same two files by one. */
export async function benchWorkers(place: BenchPlace, rows: number): Promise<Figure[]> {
  const half = Math.ceil(rows / 2);
  const files = [join(place.folder, "first.csv"), join(place.folder, "second.csv")];
  await writePings(files[0], half, 3, PING_START_MS);
  await writePings(files[1], half, 4, PING_START_MS + DAY_MS);
  const alone = await cityWith(place, "one_worker", files);
  const one = await ingestIn(alone.url, place.folder, alone.uploadIds);
  await requireDone(alone.url, place.folder, alone.uploadIds, one);
  const shared = await cityWith(place, "two_workers", files);
  const two = await Promise.all(shared.uploadIds.map((id) => ingestIn(shared.url, place.folder, [id])));
  await requireDone(shared.url, place.folder, shared.uploadIds, two[0]);
  return [figure("two files by two workers", secondsOf(two), "s", "by one worker", secondsOf([one]))];
}

function secondsOf(runs: readonly Run[]): number {
  return (Math.max(...runs.map((run) => run.endMs)) - Math.min(...runs.map((run) => run.startMs))) / 1000;
}

async function cityWith(place: BenchPlace, name: string, files: readonly string[]): Promise<{ url: string; uploadIds: string[] }> {
  const url = await place.newDatabase(name);
  return within(url, place.folder, async ({ ctx }) => {
    const junctions = join(place.folder, "junctions.csv");
    await writeJunctions(junctions);
    await ingestUpload(ctx, { uploadId: await receive(ctx, "junctions", junctions) });
    const uploadIds: string[] = [];
    for (const file of files) uploadIds.push(await receive(ctx, "pings", file));
    return { url, uploadIds };
  });
}

async function receive(ctx: Context, kind: UploadKind, path: string): Promise<string> {
  const { uploadId, detected } = await receiveUpload(ctx, { kind, name: basename(path) }, createReadStream(path));
  await startUpload(ctx, { uploadId, mapping: detected.mapping, supplier: "Bench fleets" });
  return uploadId;
}

function bareCopy(url: string, folder: string, file: string): Promise<number> {
  return within(url, folder, async ({ database }) => {
    const client = await database.pool.connect();
    try {
      await client.query("create table bare (vehicle_id text, at_ms bigint, lat float8, lon float8, speed_kmh float4, heading float4)");
      const startMs = performance.now();
      await pipeline(createReadStream(file, { highWaterMark: 1 << 20 }), client.query(copyFrom("copy bare from stdin (format csv, header)")));
      return secondsSince(startMs);
    } finally {
      client.release();
    }
  });
}

function requireDone(url: string, folder: string, uploadIds: readonly string[], run: Run): Promise<void> {
  return within(url, folder, async ({ ctx }) => {
    for (const id of uploadIds) {
      const [row] = await ctx.db.select({ state: uploads.state, failure: uploads.failure }).from(uploads).where(eq(uploads.id, id));
      if (row.state !== "done") throw new Error(`A generated file could not be read in: ${row.failure}`);
    }
    if (run.ranked === 0) throw new Error("No junction of the generated city was ranked.");
  });
}

async function within<T>(url: string, folder: string, work: (open: OpenContext) => Promise<T>): Promise<T> {
  const open = openContext(url, folder);
  try {
    return await work(open);
  } finally {
    await open.close();
  }
}

function ingestIn(url: string, folder: string, uploadIds: readonly string[]): Promise<Run> {
  const program = fileURLToPath(new URL("./ingest-process.ts", import.meta.url));
  // With the options of this process: the loader of TypeScript, and a profiler where one is on.
  const child = spawn(process.execPath, [...process.execArgv, program, url, folder, ...uploadIds], { stdio: ["ignore", "pipe", "inherit"] });
  let out = "";
  child.stdout.on("data", (chunk: Buffer) => (out += chunk.toString()));
  return new Promise((resolve, reject) => {
    child.on("error", reject);
    child.on("close", (code) => {
      if (code === 0) resolve(JSON.parse(out.trim().split("\n").at(-1) ?? "") as Run);
      else reject(new Error(`The ingest process ended with code ${code}.`));
    });
  });
}
