import { count } from "drizzle-orm";
import type { Database } from "@/db/client";
import { junctions, settings as settingRows } from "@/db/schema";
import { CitySettings } from "@/domain/settings";
import type { Env } from "@/env";
import { writeSettings } from "@/services/settings/get-settings";

export interface SeedOptions {
  database: Database;
  settings: Env;
  /** Shows what is being done, a line at a time. */
  say: (line: string) => void;
}

const VARNMOUTH = CitySettings.parse({ cityName: "Varnmouth", timeZone: "Atlantic/Azores", driveSide: "right", units: "metric" });

/** Puts the invented city into an empty database. Safe to run again after it was cut short. */
export async function seedCity({ database, say }: SeedOptions): Promise<void> {
  const { db } = database;
  const [{ rows }] = await db.select({ rows: count() }).from(settingRows);
  if (rows === 0) await writeSettings(db, VARNMOUTH, new Date());
  const [{ known }] = await db.select({ known: count() }).from(junctions);
  if (known > 0) return;
  say("no junctions yet");
}
