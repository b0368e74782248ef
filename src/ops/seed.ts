import { createReadStream } from "node:fs";
import { rm } from "node:fs/promises";
import { basename, join } from "node:path";
import { eq } from "drizzle-orm";
import { generateCity } from "@seed/index";
import type { Database } from "@/db/client";
import { settings as settingRows, uploads } from "@/db/schema";
import { CitySettings } from "@/domain/settings";
import type { UploadKind } from "@/domain/upload";
import { keepsMail, smtpUrl, type Env } from "@/env";
import { openQueue } from "@/jobs/queue";
import { keptMailFolder } from "@/mail/kept-mail";
import { openMailer } from "@/mail/mailer";
import type { Context } from "@/services/context";
import { ingestUpload } from "@/services/ingest/ingest-upload";
import { writeSettings } from "@/services/settings/get-settings";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { openStorage } from "@/storage/open-storage";

export interface SeedOptions {
  database: Database;
  settings: Env;
  /** Shows what is being done, a line at a time. */
  say: (line: string) => void;
}

const VARNMOUTH = CitySettings.parse({ cityName: "Varnmouth", timeZone: "Atlantic/Azores", driveSide: "right", units: "metric" });
const DONE = "demo_city";

/** Puts the invented city into an empty database, by the path that every upload takes. Safe to run again after it was cut short. */
export async function seedCity({ database, settings, say }: SeedOptions): Promise<void> {
  const { db } = database;
  const [done] = await db.select({ key: settingRows.key }).from(settingRows).where(eq(settingRows.key, DONE));
  if (done) return;
  const [foreign] = await db.select({ id: uploads.id }).from(uploads).where(eq(uploads.state, "done")).limit(1);
  const [named] = await db.select({ key: settingRows.key }).from(settingRows).where(eq(settingRows.key, "city"));
  // Somebody's own data: an invented city has no business among them.
  if (foreign && !named) return;
  await writeSettings(db, VARNMOUTH, new Date());

  const queue = openQueue(db);
  const mailer = openMailer({ smtpUrl: smtpUrl(settings), from: settings.MAIL_FROM, keptFolder: keepsMail(settings) ? keptMailFolder(settings.DATA_DIR) : null });
  const ctx: Context = {
    actor: { type: "job", job: "demo city" },
    db,
    now: new Date(),
    storage: openStorage(settings),
    queue,
    mailer,
    baseUrl: settings.BASE_URL,
  };
  const outDir = join(settings.DATA_DIR, "demo-city");
  try {
    const files = await generateCity({ outDir, scale: settings.DEMO_CITY, onProgress: (share, what) => say(`${Math.round(share * 100)} % ${what}`) });
    await take(ctx, "junctions", files.junctionsFile);
    for (const [i, file] of files.pingFiles.entries()) {
      say(`reading in ${basename(file)}, ${i + 1} of ${files.pingFiles.length}`);
      await take(ctx, "pings", file);
    }
    await db.insert(settingRows).values({ key: DONE, value: settings.DEMO_CITY }).onConflictDoNothing();
  } finally {
    await queue.stop();
    mailer.close();
    await rm(outDir, { recursive: true, force: true });
  }
}

async function take(ctx: Context, kind: UploadKind, path: string): Promise<void> {
  const { uploadId, detected, sameAs } = await receiveUpload(ctx, { kind, name: basename(path) }, createReadStream(path));
  if (sameAs) return;
  await startUpload(ctx, { uploadId, mapping: detected.mapping, supplier: "Varnmouth fleets" });
  await ingestUpload(ctx, { uploadId });
  const [row] = await ctx.db.select({ state: uploads.state, failure: uploads.failure }).from(uploads).where(eq(uploads.id, uploadId));
  if (row.state !== "done") throw new Error(`${basename(path)} could not be read in: ${row.failure}`);
}
