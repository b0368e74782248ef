import type { Db } from "@/db/client";
import { dayFromIso, isoFromDay } from "@/domain/local-time";
import type { StripQuery } from "@/domain/junction";
import { isChosenDay, listSlices } from "../screens/screen-data";

/** Longer choices would send more tracks than a strip can show. */
const MOST_DAYS = 60;

/** Local dates with data that a strip pools: the newest of the chosen ones, or the single day asked for. */
export async function chosenDates(db: Db, query: Pick<StripQuery, "days" | "since" | "until" | "day">): Promise<string[]> {
  const known = [...new Set((await listSlices(db)).map((slice) => slice.day))];
  const single = query.day === undefined ? null : dayFromIso(query.day);
  const chosen = known.filter((day) => (single === null ? isChosenDay(day, query) : day === single));
  return chosen.slice(-MOST_DAYS).map(isoFromDay);
}
