import { createHash } from "node:crypto";
import { sql } from "drizzle-orm";
import { decodeScreenDay } from "@/core/scores/screen-day-codec";
import type { Db } from "@/db/client";

/** Rows as text without the numbers that the database hands out, in an order of their own. */
const TABLES: Record<string, string> = {
  exits: "select e.code, j.code as junction, bearing_deg, line, support, method_version from exits e join junctions j on j.id = e.junction_id",
  legs: `select l.code, j.code as junction, l.name, l.bearing_deg, l.line, e.code as upstream, l.storage_m, l.free_speed_ms, l.speed_limit_ms, l.origin,
    l.stop_line_origin, l.locked, l.support, l.doubts from legs l join junctions j on j.id = l.junction_id left join exits e on e.id = l.upstream_exit_id`,
  movements: `select m.code, l.code as leg, e.code as exit, m.turn_deg, m.turn, m.reference_s, m.reference_source, m.reference_n, m.cordon_up_m, m.cordon_down_m
    from movements m join legs l on l.id = m.leg_id join exits e on e.id = m.exit_id`,
  traversals: `select u.file_name, l.code as leg, m.code as movement, t.local_day, t.vehicle, t.enter_at, t.stop_line_at, t.exit_at, t.delay_s, t.stops, t.stopped_s,
    t.farthest_stop_m, t.flags, t.track from traversals t join uploads u on u.id = t.upload_id join legs l on l.id = t.leg_id join movements m on m.id = t.movement_id`,
  clouds: "select u.file_name, j.code, c.payload from ping_clouds c join uploads u on u.id = c.upload_id join junctions j on j.id = c.junction_id",
  uploads: "select file_name, kind, state, failure, progress, report, rejects_key is not null as rejects from uploads",
};

export type Checksums = Record<string, { rows: number; md5: string }>;

/** One line for each table of results: equal where everything that matters is equal. */
export async function resultChecksums(db: Db): Promise<Checksums> {
  const sums: Checksums = {};
  for (const [name, query] of Object.entries(TABLES)) {
    const { rows } = await db.execute<{ text: string }>(sql.raw(`select row.*::text as text from (${query}) row order by text`));
    sums[name] = checksum(rows.map((row) => row.text));
  }
  sums.screenDays = checksum(await slices(db));
  return sums;
}

function checksum(lines: string[]): Checksums[string] {
  return { rows: lines.length, md5: createHash("md5").update(lines.join("\n")).digest("hex") };
}

/** Slices know legs and movements by their keys; here they stand by their codes. */
async function slices(db: Db): Promise<string[]> {
  const codes = async (table: string) => {
    const { rows } = await db.execute<{ id: number; code: string }>(sql.raw(`select id, code from ${table}`));
    return new Map(rows.map((row) => [row.id, row.code]));
  };
  const legs = await codes("legs");
  const movements = await codes("movements");
  const { rows } = await db.execute<{ name: string; day: number; payload: Buffer }>(
    sql.raw("select u.file_name as name, d.day, d.payload from screen_days d join uploads u on u.id = d.upload_id order by name, day"),
  );
  return rows.map(({ name, day, payload }) => {
    const { movement, leg, ...columns } = decodeScreenDay(payload);
    const named = { movement: Array.from(movement, (key) => movements.get(key)), leg: Array.from(leg, (key) => legs.get(key)) };
    const plain = Object.entries(columns).map(([key, value]) => [key, ArrayBuffer.isView(value) ? Array.from(value as Uint32Array) : value]);
    return JSON.stringify([name, day, named, plain]);
  });
}

/** As before the first file of pings: nothing learned, nothing stored, the files waiting for their start. */
export async function forgetResults(db: Db): Promise<void> {
  const { rows } = await db.execute<{ name: string }>(sql`select inhrelid::regclass::text as name from pg_inherits where inhparent = 'traversals'::regclass`);
  for (const { name } of rows) await db.execute(sql.raw(`drop table ${name}`));
  await db.execute(sql`truncate screen_days, ping_clouds, movements, legs, exits`);
  await db.execute(sql`update uploads set state = 'received', report = null, rejects_key = null, finished_at = null where kind = 'pings'`);
  await db.execute(sql`delete from pgboss.job`);
}
