import { createWriteStream } from "node:fs";
import { join } from "node:path";
import { pipeline } from "node:stream/promises";
import { DuckDBInstance } from "@duckdb/node-api";
import type { Pool } from "pg";
import { to as copyTo } from "pg-copy-streams";
import type { ScreenQuery } from "@/domain/screen";

/** Mean delay by junction. */
export type Means = Map<number, number>;

type Filter = Pick<ScreenQuery, "days" | "turn"> & { from: number; to: number };

/** The ISO week days that a choice of days stands for. */
const WEEKDAYS: Record<ScreenQuery["days"], string> = { weekdays: "1,2,3,4,5", saturday: "6", sunday: "7", every: "1,2,3,4,5,6,7" };

/** Rows of the traversals that pass a filter, and the values that stand for $1 to $3 in it. */
const FROM_TRAVERSALS = (days: ScreenQuery["days"]): string => `
  from traversals t join movements m on m.id = t.movement_id join legs l on l.id = m.leg_id
  where extract(isodow from t.local_day) in (${WEEKDAYS[days]})
    and t.stop_line_at at time zone 'UTC' - t.local_day >= make_interval(mins => $1)
    and t.stop_line_at at time zone 'UTC' - t.local_day < make_interval(mins => $2)
    and ($3 = 'any' or m.turn = $3)
  group by l.junction_id`;

/** The same means by a plain GROUP BY over the traversals. */
export async function meansByPostgres(pool: Pool, { days, turn, from, to }: Filter): Promise<Means> {
  const { rows } = await pool.query<{ junction_id: number; mean: number }>(`select l.junction_id, avg(t.delay_s) as mean ${FROM_TRAVERSALS(days)}`, [from, to, turn]);
  return new Map(rows.map((row) => [row.junction_id, row.mean]));
}

/**
 * What a ranking says of the delays of junctions, by a plain GROUP BY: mean, spread, median, 95th percentile, stops,
 * vehicles and days. It leaves out what the ranking also works out: intervals, evidence, shrinkage, ranks, worst
 * movements, queues.
 */
export async function figuresByPostgres(pool: Pool, { days, turn, from, to }: Filter): Promise<void> {
  await pool.query(
    `select l.junction_id, count(*), avg(t.delay_s), stddev_samp(t.delay_s), percentile_cont(0.5) within group (order by t.delay_s),
       percentile_cont(0.95) within group (order by t.delay_s), avg(t.stops), count(*) filter (where t.stops > 0), count(distinct t.vehicle), count(distinct t.local_day)
     ${FROM_TRAVERSALS(days)}`,
    [from, to, turn],
  );
}

export interface ColumnEngine {
  group(filter: Filter): Promise<Means>;
  close(): void;
}

/** The same traversals in a columnar engine in memory, of the columns that the grouping needs and no others. */
export async function openColumnEngine(pool: Pool, folder: string): Promise<ColumnEngine> {
  const file = join(folder, "traversals.csv");
  const client = await pool.connect();
  try {
    const columns = `l.junction_id, m.turn, extract(isodow from t.local_day)::int, extract(epoch from t.stop_line_at at time zone 'UTC' - t.local_day) / 60, t.delay_s`;
    const rows = `select ${columns} from traversals t join movements m on m.id = t.movement_id join legs l on l.id = m.leg_id`;
    await pipeline(client.query(copyTo(`copy (${rows}) to stdout (format csv)`)), createWriteStream(file));
  } finally {
    client.release();
  }
  const instance = await DuckDBInstance.create(":memory:");
  const connection = await instance.connect();
  const types = "{'junction': 'INTEGER', 'turn': 'VARCHAR', 'weekday': 'TINYINT', 'minute': 'FLOAT', 'delay': 'FLOAT'}";
  await connection.run(`create table traversals as from read_csv('${file}', header = false, columns = ${types})`);
  return {
    async group({ days, turn, from, to }) {
      const chosen = `weekday in (${WEEKDAYS[days]}) and minute >= ${from} and minute < ${to}${turn === "any" ? "" : ` and turn = '${turn}'`}`;
      const reader = await connection.runAndReadAll(`select junction, avg(delay) from traversals where ${chosen} group by junction`);
      return new Map(reader.getRows().map(([junction, mean]) => [Number(junction), Number(mean)]));
    },
    close() {
      connection.closeSync();
      instance.closeSync();
    },
  };
}
