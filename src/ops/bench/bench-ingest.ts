import { spawn } from "node:child_process";
import { createReadStream } from "node:fs";
import { rm } from "node:fs/promises";
import { basename, join } from "node:path";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { setTimeout as delay } from "node:timers/promises";
import { fileURLToPath } from "node:url";
import { eq } from "drizzle-orm";
import { from as copyFrom } from "pg-copy-streams";
import { uploads } from "@/db/schema";
import { ScreenQuery } from "@/domain/screen";
import type { UploadKind } from "@/domain/upload";
import type { Context } from "@/services/context";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { rankJunctions } from "@/services/screens/rank-junctions";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { WORKER_OPTIONS } from "../setup/processes.mjs";
import { PING_START_MS } from "./bench-parse";
import { openContext, type BenchPlace, type OpenContext } from "./bench-place";
import { figure, secondsSince, type Figure } from "./figures";
import { pingChunks, writeJunctions, writePings } from "./traffic";

const MEMORY_BOUND_MIB = 1024;
const LOOK_MS = 10;

interface Reading {
  seconds: number;
  /** Of the worker that needed most. */
  peakMiB: number;
  /** Of all workers. */
  cpuS: number;
}

/** File on disk to ranked screen by two workers, as a machine of two cores runs them, beside a bare COPY of the same bytes. */
export async function benchIngest(place: BenchPlace, rows: number): Promise<Figure[]> {
  const file = join(place.folder, "pings.csv");
  await writePings(file, rows, 2, PING_START_MS);
  const city = await cityWith(place, "ingest", createReadStream(file));
  const copyS = await bareCopy(city.url, place.folder, file);
  const { seconds, peakMiB, cpuS } = await read(city, place.folder, 2);
  await rm(file);
  return [
    figure("ingest, file to ranked screen", seconds, "s", "bare COPY into one logged table", copyS),
    figure("ingest, processor time of its workers", cpuS, "s", "bare COPY into one logged table", copyS),
    figure("ingest, peak memory of a worker", peakMiB, "MiB", "bound", MEMORY_BOUND_MIB),
  ];
}

/** Learning the streets is one worker's and takes as long for any file: in a smaller one it would be most of the work. */
const LEAST_SHARED_ROWS = 4_000_000;

/** One file by two workers, beside the same file by one. */
export async function benchWorkers(place: BenchPlace, wantedRows: number): Promise<Figure[]> {
  const rows = Math.max(LEAST_SHARED_ROWS, wantedRows);
  const file = join(place.folder, "shared.csv");
  await writePings(file, rows, 3, PING_START_MS);
  const one = await read(await cityWith(place, "one_worker", createReadStream(file)), place.folder, 1);
  const two = await read(await cityWith(place, "two_workers", createReadStream(file)), place.folder, 2);
  await rm(file);
  return [figure(`one file of ${rows / 1e6} million rows by two workers`, two.seconds, "s", "by one worker", one.seconds)];
}

/** A file that is made on the fly and fits into no worker's memory. */
export async function benchMemory(place: BenchPlace, rows: number): Promise<Figure[]> {
  const made = Readable.from(pingChunks(rows, 5, PING_START_MS), { objectMode: true, highWaterMark: 2 }).map((text: string) => Buffer.from(text));
  const { seconds, peakMiB } = await read(await cityWith(place, "memory", made), place.folder, 2);
  return [
    figure(`a file of ${rows / 1e6} million rows, peak memory of a worker`, peakMiB, "MiB", "bound", MEMORY_BOUND_MIB),
    figure(`a file of ${rows / 1e6} million rows`, rows / seconds / 1e6, "M rows/s", "a million a second", 1),
  ];
}

interface City {
  url: string;
  /** Starts the reading of the file; answers with the upload. */
  start: (ctx: Context) => Promise<string>;
}

async function cityWith(place: BenchPlace, name: string, file: AsyncIterable<Uint8Array>): Promise<City> {
  const url = await place.newDatabase(name);
  return within(url, place.folder, async ({ ctx }) => {
    const junctions = join(place.folder, "junctions.csv");
    await writeJunctions(junctions);
    const uploadId = await (await receive(ctx, "junctions", basename(junctions), createReadStream(junctions)))(ctx);
    await ingestUpload(ctx, { uploadId });
    return { url, start: await receive(ctx, "pings", `${name}.csv`, file) };
  });
}

async function receive(ctx: Context, kind: UploadKind, name: string, content: AsyncIterable<Uint8Array>): Promise<City["start"]> {
  const { uploadId, detected } = await receiveUpload(ctx, { kind, name }, content);
  return async (by) => {
    await startUpload(by, { uploadId, mapping: detected.mapping, supplier: "Bench fleets" });
    return uploadId;
  };
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

/** From the order to read the file to the ranked screen, by so many workers that are there already. */
async function read({ url, start }: City, folder: string, workers: number): Promise<Reading> {
  const started = await Promise.all(Array.from({ length: workers }, () => startWorker(url, folder)));
  const seconds = await within(url, folder, async ({ ctx }) => {
    const startMs = performance.now();
    await untilDone(ctx, await start(ctx));
    const { rows } = await rankJunctions(ctx, ScreenQuery.parse({ period: "all", days: "every" }));
    if (!rows.some((row) => row.rank !== null)) throw new Error("No junction of the generated city was ranked.");
    return secondsSince(startMs);
  });
  const ends = await Promise.all(started.map((worker) => worker.stop()));
  return { seconds, peakMiB: Math.max(...ends.map((end) => end.peakMiB)), cpuS: ends.reduce((sum, end) => sum + end.cpuS, 0) };
}

async function untilDone(ctx: Context, uploadId: string): Promise<void> {
  for (;;) {
    const [row] = await ctx.db.select({ state: uploads.state, failure: uploads.failure }).from(uploads).where(eq(uploads.id, uploadId));
    if (row.state === "failed") throw new Error(`A generated file could not be read in: ${row.failure}`);
    if (row.state === "done") return;
    await delay(LOOK_MS);
  }
}

interface Worker {
  stop(): Promise<{ peakMiB: number; cpuS: number }>;
}

async function startWorker(url: string, folder: string): Promise<Worker> {
  const program = fileURLToPath(new URL("./ingest-process.ts", import.meta.url));
  // With the options of this process: the loader of TypeScript, and a profiler where one is on.
  const child = spawn(process.execPath, [...process.execArgv, ...WORKER_OPTIONS, program, url, folder], { stdio: ["ignore", "pipe", "inherit"] });
  let out = "";
  const ready = new Promise<void>((resolve, reject) => {
    child.on("error", reject);
    child.stdout.on("data", (chunk: Buffer) => {
      out += chunk.toString();
      if (out.includes("ready")) resolve();
    });
  });
  const ended = new Promise<number | null>((resolve) => child.on("close", resolve));
  await Promise.race([ready, ended.then((code) => Promise.reject(new Error(`A worker of the bench ended with code ${code}.`)))]);
  return {
    async stop() {
      child.kill("SIGTERM");
      const code = await ended;
      if (code !== 0) throw new Error(`A worker of the bench ended with code ${code}.`);
      return JSON.parse(out.trim().split("\n").at(-1) ?? "") as { peakMiB: number; cpuS: number };
    },
  };
}

async function within<T>(url: string, folder: string, work: (open: OpenContext) => Promise<T>): Promise<T> {
  const open = openContext(url, folder);
  try {
    return await work(open);
  } finally {
    await open.close();
  }
}
