import { and, eq, inArray, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { uploads } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { CitySettings } from "@/domain/settings";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";
import { getSettings, writeSettings } from "./get-settings";

export async function saveSettings(ctx: Context, input: CitySettings): Promise<CitySettings> {
  requirePermission(ctx, "setting.manage");
  const next = CitySettings.parse(input);
  await ctx.db.transaction(async (tx) => {
    const before = await getSettings({ db: tx });
    await requireKnownZone(tx, next.timeZone);
    await refuseLateChange(tx, before, next);
    await writeSettings(tx, next, ctx.now);
    await recordAudit(tx, ctx, { action: "changed settings", subject: next.cityName, detail: { before, after: next } });
  });
  return next;
}

/** Strips reckon by the database's zones and all else by the server's: some names mean two zones. */
async function requireKnownZone(db: Db, timeZone: string): Promise<void> {
  const { rows } = await db.execute(sql`select 1 from pg_timezone_names where lower(name) = lower(${timeZone})`);
  if (rows.length > 0) return;
  const sentence = `The database does not know the time zone ${timeZone}. Give an area and place, such as Atlantic/Azores.`;
  throw new AppError("invalid", sentence, { fieldErrors: { timeZone: [sentence] } });
}

/** Local days and turns of what is stored rest on these two: changed later, old and new figures would not fit together. */
async function refuseLateChange(db: Db, before: CitySettings, next: CitySettings): Promise<void> {
  const changed = [
    next.timeZone === before.timeZone ? null : { field: "timeZone", name: "time zone", rest: "the local days" },
    next.driveSide === before.driveSide ? null : { field: "driveSide", name: "side of the road", rest: "the legs and turns" },
  ].filter((change) => change !== null);
  if (changed.length === 0 || !(await hasTraversals(db))) return;
  const sentenceOf = ({ name, rest }: (typeof changed)[number]) => `The ${name} cannot change any more: ${rest} of the pings that are read in rest on it.`;
  throw new AppError("conflict", changed.map(sentenceOf).join(" "), {
    fieldErrors: Object.fromEntries(changed.map((change) => [change.field, [sentenceOf(change)]])),
  });
}

async function hasTraversals(db: Db): Promise<boolean> {
  const { rows } = await db.execute(sql`select 1 from traversals limit 1`);
  if (rows.length > 0) return true;
  const beingRead = and(eq(uploads.kind, "pings"), inArray(uploads.state, ["waiting", "reading"]));
  return (await db.select({ id: uploads.id }).from(uploads).where(beingRead).limit(1)).length > 0;
}
