import { setFlagsFromString } from "node:v8";
import { runInNewContext } from "node:vm";
import { gzipSync } from "node:zlib";
import type { Pool } from "pg";
import { ScreenQuery } from "@/domain/screen";
import { DAY_TYPES } from "@/domain/screen-choices";
import { raiseDataVersion } from "@/services/catalogue/catalogue";
import type { Context } from "@/services/context";
import { rankJunctions } from "@/services/screens/rank-junctions";
import type { OpenContext } from "./bench-place";
import { figure, p95, sum, timesOf, type Figure } from "./figures";
import { figuresByPostgres, meansByPostgres, openColumnEngine, type Means } from "./grouped";

const BOUND_MS = 150;
const FIRST_MS = 1000;
const HELD_MIB = 300;
const WARM_UP = 10;
/** Filters that the slow alternatives answer, too; of those that give all figures the first only, since sorting takes its time. */
const COMPARED = 6;
const COMPARED_WHOLE = 2;
const TURNS = ["any", "through", "left", "right"] as const;

type RankingFilter = ScreenQuery & { from: number; to: number };

const isWholeDay = (i: number): boolean => i % 10 === 9;

/** No two alike, so that none is answered from memory of an earlier one: windows of one to five hours, and every tenth a whole day. */
function filters(): RankingFilter[] {
  return Array.from({ length: 60 }, (_, i) => {
    const turn = TURNS[Math.floor(i / 3) % TURNS.length];
    if (isWholeDay(i)) return { ...ScreenQuery.parse({ days: i % 20 === 9 ? "weekdays" : "every" }), from: 15 * Math.floor(i / 10), to: 1440 };
    const from = 360 + (i % 20) * 30;
    // Day types and turns change at different paces, so that the first few differ in both.
    return { ...ScreenQuery.parse({ days: DAY_TYPES[i % DAY_TYPES.length], turn }), from, to: from + 60 + Math.floor(i / 20) * 120 };
  });
}

export async function benchRanking({ ctx, database: { pool } }: OpenContext, folder: string): Promise<Figure[]> {
  const first = await firstRankings(ctx, pool);
  const all = filters();
  // Warm: the code is compiled by now, and the answers to be timed are not known.
  await timesOf(all.slice(0, WARM_UP), (filter) => rankJunctions(ctx, { ...filter, from: filter.from + 15 }));
  const times = await timesOf(all, (filter) => rankJunctions(ctx, filter));
  const json = JSON.stringify(await rankJunctions(ctx, all[0]));
  const { rows } = await pool.query<{ junctions: number }>("select count(*)::int as junctions from junctions");
  const mean = (count: number): number => sum(times.slice(0, count)) / count;
  const slow = await timeAlternatives(ctx, pool, folder, all.slice(0, COMPARED));
  return [
    figure("first ranking after a start", first.startMs, "ms", "bound", FIRST_MS),
    figure("first ranking of all after a late file", first.renewedMs, "ms", "bound", FIRST_MS),
    figure("ranking for a filter, p95", p95(times), "ms", "bound", BOUND_MS),
    figure("of these, windows of one to five hours, p95", p95(times.filter((_, i) => !isWholeDay(i))), "ms", "bound", BOUND_MS),
    figure("of these, whole days, p95", p95(times.filter((_, i) => isWholeDay(i))), "ms", "bound", BOUND_MS),
    figure("ranking for a filter, mean", mean(COMPARED_WHOLE), "ms", "plain GROUP BY of the junctions' figures", slow.sameMs),
    figure("ranking for a filter, mean", mean(COMPARED), "ms", "plain GROUP BY of means alone", slow.meansMs),
    figure("ranking for a filter, mean", mean(COMPARED), "ms", "columnar engine in memory, means alone", slow.engineMs),
    figure("memory held for rankings", first.heldMiB, "MiB", "bound", HELD_MIB),
    figure("ranking as JSON", json.length / 1024, "kB", "one kB a junction", rows[0].junctions),
    figure("ranking as JSON, gzip", gzipSync(json).length / 1024, "kB", "the same as it is", json.length / 1024),
  ];
}

/** From an empty memory, as after a start; then of all days, which stay in memory; then when a file has come late for one of them. */
async function firstRankings(ctx: Context, pool: Pool): Promise<{ startMs: number; renewedMs: number; heldMiB: number }> {
  const before = await bytesInUse();
  const [startMs] = await timesOf([ScreenQuery.parse({})], (query) => rankJunctions(ctx, query));
  const everything = ScreenQuery.parse({ period: "all", days: "every" });
  await rankJunctions(ctx, everything);
  const heldMiB = ((await bytesInUse()) - before) / 2 ** 20;
  await addLateFile(ctx, pool);
  const [renewedMs] = await timesOf([everything], (query) => rankJunctions(ctx, query));
  return { startMs, renewedMs, heldMiB };
}

/** Of the heap and of buffers, without what is about to be collected. */
async function bytesInUse(): Promise<number> {
  setFlagsFromString("--expose-gc");
  const collect = runInNewContext("gc") as () => void;
  // Buffers go a moment after the objects that held them.
  for (let round = 0; round < 3; round++) {
    collect();
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  const { heapUsed, arrayBuffers } = process.memoryUsage();
  return heapUsed + arrayBuffers;
}

/** A second upload with what is known of the last day already: it changes no figure, and the day must be read and merged anew. */
async function addLateFile(ctx: Context, pool: Pool): Promise<void> {
  await pool.query(
    `with late as (
       insert into uploads (kind, file_name, storage_key, bytes, sha256, state, created_at)
       values ('pings', 'late.csv', 'uploads/late.csv', 1, 'late', 'done', now()) returning id
     )
     insert into screen_days (upload_id, day, method_version, median_interval_s, traversals, payload)
     select late.id, day, method_version, median_interval_s, traversals, payload from screen_days, late order by day desc limit 1`,
  );
  await raiseDataVersion(ctx.db);
}

/** Mean milliseconds of other ways to the same filters, all of whose means must be ours. */
async function timeAlternatives(ctx: Context, pool: Pool, folder: string, compared: readonly RankingFilter[]): Promise<{ sameMs: number; meansMs: number; engineMs: number }> {
  const means = await timesOf(compared, (filter) => meansByPostgres(pool, filter));
  const same = await timesOf(compared.slice(0, COMPARED_WHOLE), (filter) => figuresByPostgres(pool, filter));
  const engine = await openColumnEngine(pool, folder);
  try {
    await engine.group({ ...compared[0], to: 1440 });
    const engineTimes = await timesOf(compared, (filter) => engine.group(filter));
    let figures = 0;
    for (const filter of compared) {
      const { rows } = await rankJunctions(ctx, filter);
      const ours: Means = new Map(rows.flatMap(({ junctionId, delay }) => (delay ? [[junctionId, delay.value]] : [])));
      requireSame(ours, await meansByPostgres(pool, filter), "GROUP BY");
      requireSame(ours, await engine.group(filter), "columnar engine");
      figures += ours.size;
    }
    if (figures === 0) throw new Error("No ranking has figures to compare: give --traversals a larger number.");
    const mean = (times: readonly number[]): number => sum(times) / times.length;
    return { sameMs: mean(same), meansMs: mean(means), engineMs: mean(engineTimes) };
  } finally {
    engine.close();
  }
}

/** Delays of the slices are rounded to 1/64 s, means that are sent to 1/100 s. */
const MOST_APART_S = 1 / 128 + 1 / 200;

function requireSame(ours: Means, theirs: Means, name: string): void {
  for (const [junction, mean] of ours) {
    const other = theirs.get(junction) ?? NaN;
    if (!(Math.abs(mean - other) <= MOST_APART_S)) throw new Error(`Junction ${junction}: ${mean} s from the slices, ${other} s from the ${name}.`);
  }
}
