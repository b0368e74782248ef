import { eq } from "drizzle-orm";
import type { Db } from "@/db/client";
import { settings } from "@/db/schema";
import { CitySettings } from "@/domain/settings";

const KEY = "city";

/** Every page shows city, units and times by these; they are no secret and need no permission. */
export async function getSettings(ctx: { db: Db }): Promise<CitySettings> {
  const [row] = await ctx.db.select({ value: settings.value }).from(settings).where(eq(settings.key, KEY));
  return CitySettings.parse(row?.value ?? {});
}

export async function writeSettings(db: Db, value: CitySettings, now: Date): Promise<void> {
  await db.insert(settings).values({ key: KEY, value, updatedAt: now }).onConflictDoUpdate({ target: settings.key, set: { value, updatedAt: now } });
}
