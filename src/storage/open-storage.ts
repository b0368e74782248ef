import { join } from "node:path";
import type { Env } from "@/env";
import { openFolderStorage, removeOldPartials, removeOldPieces } from "./folder-storage";
import { openS3Storage } from "./s3-storage";
import type { Storage } from "./storage";

const folderOf = (settings: Env) => join(settings.DATA_DIR, "storage");

/** The bucket that the settings name, else a folder of this machine: web, worker and seed all keep files here. */
export function openStorage(settings: Env): Storage {
  if (settings.S3_BUCKET === undefined) return openFolderStorage(folderOf(settings));
  const { S3_ACCESS_KEY_ID: accessKeyId, S3_SECRET_ACCESS_KEY: secretAccessKey } = settings;
  return openS3Storage({
    bucket: settings.S3_BUCKET,
    region: settings.S3_REGION,
    endpoint: settings.S3_ENDPOINT,
    credentials: accessKeyId && secretAccessKey ? { accessKeyId, secretAccessKey } : undefined,
  });
}

/** Sweeps the folder; a bucket forgets unfinished transfers and what lies under `pieces/` for days by rules of its own. */
export async function sweepStorage(settings: Env, now: Date): Promise<void> {
  if (settings.S3_BUCKET !== undefined) return;
  await removeOldPartials(folderOf(settings), now);
  await removeOldPieces(folderOf(settings), now);
}
