import { openAsBlob } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import type { Pool } from "pg";
import type { Detection, UploadView } from "@/domain/upload";
import { seededRandom } from "@/core/stats/random";
import { nextAct, type City } from "./crowd-acts";
import { figure, p95, type Figure } from "./figures";
import { SESSION_COOKIE, type Product } from "./product";
import { writeJunctions, writePings } from "./traffic";

const USERS = 50;
const BOUND_MS = 500;
/** Between two acts a person reads: as long as this at least, and at most twice as long again. */
const READING_MS = 2000;
/** One person who never stops to read, before the others come: the first answers after a start are the slow ones. */
const WARM_UP_MS = 8000;
const POLL_MS = 500;
const FIRST_FILE_MS = Date.parse("2027-03-01T06:00:00Z");
const DAY_MS = 86_400_000;

interface Answer {
  path: string;
  status: number;
  ms: number;
}

/** Fifty people at the pages and their routes for a while, as a worker reads in one file after the other. */
export async function benchCrowd(product: Product, pool: Pool, folder: string, size: { rows: number; seconds: number }): Promise<Figure[]> {
  await moveAside(pool);
  await product.startWorker();
  const cookie = `${SESSION_COOKIE}=${await product.sessionOf("engineer")}`;
  const engineer: Client = (path, init) => fetch(`${product.baseUrl}${path}`, { ...init, headers: { ...init?.headers, cookie } });
  const [lattice, ...files] = await filesOf(folder, size.rows);
  await readIn(engineer, "junctions", lattice);
  const city = await cityOf(pool);
  await behave(product, city, USERS, performance.now() + WARM_UP_MS, 0, []);

  const answers: Answer[] = [];
  const endMs = performance.now() + size.seconds * 1000;
  const reading = readFilesUntil(engineer, files, size.rows, endMs);
  await Promise.all(Array.from({ length: USERS }, (_, user) => behave(product, city, user, endMs, READING_MS, answers)));
  const filesRead = await reading;
  const good = answers.filter(({ status }) => status === 200);
  const slowest = [...answers].sort((a, b) => b.ms - a.ms).slice(0, 5);
  for (const { path, status, ms } of [...answers.filter(({ status }) => status !== 200).slice(0, 5), ...slowest]) console.error(`${status} ${Math.round(ms)} ms ${path}`);
  return [
    figure(`${answers.length} answers to ${USERS} users while an ingest runs, p95`, p95(answers.map(({ ms }) => ms)), "ms", "bound", BOUND_MS),
    figure("answers without error", good.length, "answers", "all", answers.length),
    figure("files read in meanwhile, all rows accepted", filesRead, "files", "at least", 1),
  ];
}

type Client = (path: string, init?: RequestInit) => Promise<Response>;

/** The generated traffic drives through a lattice of its own: the city of the screen makes room for it. */
async function moveAside(pool: Pool): Promise<void> {
  await pool.query("update junctions set lat = lat + 1");
}

async function cityOf(pool: Pool): Promise<City> {
  const junctions = await pool.query<{ id: number }>("select id from junctions where code like 'J%' and code not like '%-%' order by id");
  const legs = await pool.query<{ id: number }>("select id from legs where junction_id = any($1) order by id", [junctions.rows.map(({ id }) => id)]);
  return { junctionIds: junctions.rows.map(({ id }) => id), legIds: legs.rows.map(({ id }) => id) };
}

async function behave(product: Product, city: City, user: number, endMs: number, leastMs: number, answers: Answer[]): Promise<void> {
  const random = seededRandom(1000 + user);
  const role = user % 10 === 0 ? "reader" : user % 3 === 0 ? "technician" : "engineer";
  const headers = { cookie: `${SESSION_COOKIE}=${await product.sessionOf(role)}` };
  await sleep(random() * leastMs);
  while (performance.now() < endMs) {
    // What one act asks for at once, as a browser does.
    await Promise.all(nextAct(role, city, random).map(async (path) => answers.push(await ask(product.baseUrl, path, headers))));
    await sleep(leastMs * (1 + 2 * random()));
  }
}

/** As browsers do, a read whose kept connection has just been closed is sent once more. */
async function ask(baseUrl: string, path: string, headers: Record<string, string>): Promise<Answer> {
  const startMs = performance.now();
  const read = async () => {
    const response = await fetch(`${baseUrl}${path}`, { headers });
    await response.arrayBuffer();
    return response.status;
  };
  const status = await read().catch(read).catch(() => 0);
  return { path, status, ms: performance.now() - startMs };
}

/** The lattice and two files of pings, written before anybody is timed: this process is the users as well. */
async function filesOf(folder: string, rows: number): Promise<string[]> {
  const [lattice, ...pings] = ["crowd-junctions.csv", "crowd-first.csv", "crowd-second.csv"].map((name) => join(folder, name));
  await writeJunctions(lattice);
  for (const [at, path] of pings.entries()) await writePings(path, rows, 100 + at, FIRST_FILE_MS + at * DAY_MS);
  return [lattice, ...pings];
}

/** One file after the other, and again; answers how many were read in whole. The last one may end late. */
async function readFilesUntil(engineer: Client, paths: readonly string[], rows: number, endMs: number): Promise<number> {
  let files = 0;
  while (performance.now() < endMs) {
    const { report } = await readIn(engineer, "pings", paths[files % paths.length]);
    if (report?.accepted !== rows) throw new Error(`Of ${rows} generated pings ${report?.accepted} were accepted.`);
    files += 1;
  }
  return files;
}

/** By the routes that the Data page uses. */
async function readIn(engineer: Client, kind: "junctions" | "pings", path: string): Promise<UploadView> {
  const sent = await engineer(`/api/uploads?kind=${kind}&name=${kind}.csv`, { method: "POST", body: await openAsBlob(path) });
  const { uploadId, detected } = (await sent.json()) as { uploadId: string; detected: Detection };
  await engineer(`/api/uploads/${uploadId}/start`, { method: "POST", body: JSON.stringify({ mapping: detected.mapping, supplier: null }) });
  for (;;) {
    const upload = (await (await engineer(`/api/uploads/${uploadId}`)).json()) as UploadView;
    if (upload.state === "done") return upload;
    if (upload.state === "failed") throw new Error(`A generated file could not be read in: ${upload.failure}`);
    await sleep(POLL_MS);
  }
}
