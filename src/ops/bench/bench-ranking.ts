import { ScreenQuery } from "@/domain/screen";
import { DAY_TYPES } from "@/domain/screen-choices";
import { rankJunctions } from "@/services/screens/rank-junctions";
import type { OpenContext } from "./bench-place";
import { figure, p95, sum, timesOf, type Figure } from "./figures";
import { groupedByPostgres, openColumnEngine, type Means } from "./grouped";

const BOUND_MS = 150;
/** Filters that the slow alternatives answer, too. */
const COMPARED = 6;
const TURNS = ["any", "through", "left", "right"] as const;

type RankingFilter = ScreenQuery & { from: number; to: number };

/** No two alike, so that none is answered from memory of an earlier one. */
function filters(): RankingFilter[] {
  return Array.from({ length: 60 }, (_, i) => {
    const from = 360 + (i % 20) * 30;
    const to = from + 60 + Math.floor(i / 20) * 120;
    // Day types and turns change at different paces, so that the first few differ in both.
    return { ...ScreenQuery.parse({ days: DAY_TYPES[i % DAY_TYPES.length], turn: TURNS[Math.floor(i / 3) % TURNS.length] }), from, to };
  });
}

export async function benchRanking({ ctx, database }: OpenContext, folder: string): Promise<Figure[]> {
  const all = filters();
  const compared = all.slice(0, COMPARED);
  const before = process.memoryUsage();
  await rankJunctions(ctx, ScreenQuery.parse({ period: "all", days: "every" }));
  const heldMiB = (process.memoryUsage().arrayBuffers - before.arrayBuffers) / 2 ** 20;
  const { rows: stored } = await database.pool.query<{ mib: number }>("select sum(length(payload))::float8 / 1048576 as mib from screen_days");
  const times = await timesOf(all, (filter) => rankJunctions(ctx, filter));
  const groupByTimes = await timesOf(compared, (filter) => groupedByPostgres(database.pool, filter));
  const engine = await openColumnEngine(database.pool, folder);
  try {
    await engine.group(all[all.length - 1]);
    const engineTimes = await timesOf(compared, (filter) => engine.group(filter));
    let figures = 0;
    for (const filter of compared) {
      const result = await rankJunctions(ctx, filter);
      const ours: Means = new Map(result.rows.flatMap(({ junctionId, delay }) => (delay ? [[junctionId, delay.value]] : [])));
      requireSame(ours, await groupedByPostgres(database.pool, filter), "GROUP BY");
      requireSame(ours, await engine.group(filter), "columnar engine");
      figures += ours.size;
    }
    if (figures === 0) throw new Error("No ranking has figures to compare: give --traversals a larger number.");
    const meanMs = sum(times.slice(0, COMPARED)) / COMPARED;
    const result = await rankJunctions(ctx, all[0]);
    return [
      figure("ranking for a filter, p95", p95(times), "ms", "bound", BOUND_MS),
      figure("ranking for a filter, mean", meanMs, "ms", "plain GROUP BY of means alone", sum(groupByTimes) / COMPARED),
      figure("ranking for a filter, mean", meanMs, "ms", "columnar engine, means alone", sum(engineTimes) / COMPARED),
      figure("slices held in memory", heldMiB, "MiB", "the same slices as stored", stored[0].mib),
      figure("ranking as JSON", JSON.stringify(result).length / 1024, "kB", "one kB a junction", result.rows.length),
    ];
  } finally {
    engine.close();
  }
}

/** Means differ in the last digits alone: stored delays are single precision, and orders of adding differ. */
function requireSame(ours: Means, theirs: Means, name: string): void {
  for (const [junction, mean] of ours) {
    const other = theirs.get(junction) ?? NaN;
    if (!(Math.abs(mean - other) <= 1e-4 * Math.max(1, Math.abs(mean)))) {
      throw new Error(`Junction ${junction}: ${mean} s from the slices, ${other} s from the ${name}.`);
    }
  }
}
