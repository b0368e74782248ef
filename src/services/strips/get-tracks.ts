import { and, asc, desc, eq, inArray, sql } from "drizzle-orm";
import { z } from "zod";
import { encodeTrackSet } from "@/core/strips/track-set";
import { legs, movements, traversals } from "@/db/schema";
import { notFound } from "@/domain/errors";
import { StripQuery } from "@/domain/junction";
import { MOST_TRACKS } from "@/domain/screen-choices";
import { dayFromIso } from "@/domain/local-time";
import { RowKey } from "@/domain/row-key";
import { requirePermission, type Context } from "../context";
import { windowOf } from "../screens/score-city";
import { getSettings } from "../settings/get-settings";
import { chosenDates } from "./chosen-dates";

export const GetTracks = z.object({ legId: RowKey, query: StripQuery });

/** Tracks that reach into the window from before it, or leave the leg after it, belong on the strip. */
const LEAD_IN_MIN = 15;

/** The tracks of one leg in the chosen window and dates, as the bytes of a TrackSet. Nothing names a vehicle. */
export async function getTracks(ctx: Context, input: z.input<typeof GetTracks>): Promise<Uint8Array<ArrayBuffer>> {
  requirePermission(ctx, "strip.view");
  const parsed = GetTracks.safeParse(input);
  if (!parsed.success) throw notFound("Leg", String(input.legId));
  const { legId, query } = parsed.data;
  const [leg] = await ctx.db.select({ id: legs.id }).from(legs).where(eq(legs.id, legId));
  if (!leg) throw notFound("Leg", legId);

  const settings = await getSettings(ctx);
  const window = windowOf(settings, query);
  const dates = await chosenDates(ctx.db, query);
  if (dates.length === 0) return encodeTrackSet([]);
  const rows = await ctx.db
    .select({
      date: traversals.localDay,
      // By the clock on the wall, as the window is: on a day when clocks change, hours since midnight are others.
      enterS: sql<number>`extract(epoch from (${traversals.enterAt} at time zone ${settings.timeZone}) - ${traversals.localDay})`.mapWith(Number),
      movement: traversals.movementId,
      delayS: traversals.delayS,
      track: traversals.track,
    })
    .from(traversals)
    .innerJoin(movements, eq(movements.id, traversals.movementId))
    .where(
      and(
        eq(traversals.legId, legId),
        inArray(traversals.localDay, dates),
        query.turn === "any" ? undefined : eq(movements.turn, query.turn),
        sql`${localMinute(settings.timeZone)} >= ${window.fromMin - LEAD_IN_MIN}`,
        sql`${localMinute(settings.timeZone)} < ${window.toMin + LEAD_IN_MIN}`,
      ),
    )
    .orderBy(desc(traversals.localDay), asc(traversals.enterAt), asc(traversals.vehicle))
    .limit(MOST_TRACKS);
  return encodeTrackSet(
    rows.map((row) => ({
      day: dayFromIso(row.date),
      enterS: row.enterS,
      movement: row.movement,
      delayS: row.delayS,
      track: row.track,
    })),
  );
}

function localMinute(timeZone: string) {
  const local = sql`(${traversals.stopLineAt} at time zone ${timeZone})`;
  return sql`(extract(hour from ${local}) * 60 + extract(minute from ${local}))`;
}
