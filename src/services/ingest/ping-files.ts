import { and, asc, eq } from "drizzle-orm";
import type { Db } from "@/db/client";
import { uploads } from "@/db/schema";
import type { PingUpload } from "./read-file";

/** Every pings file that was read in, in order of receipt: references rest on it, so two runs must see the same. */
export async function pingFiles(db: Db): Promise<PingUpload[]> {
  const files = await db
    .select({ id: uploads.id, storageKey: uploads.storageKey, mapping: uploads.mapping })
    .from(uploads)
    .where(and(eq(uploads.kind, "pings"), eq(uploads.state, "done")))
    .orderBy(asc(uploads.createdAt), asc(uploads.receivedNo));
  return files.flatMap(({ mapping, ...file }) => (mapping ? [{ ...file, mapping }] : []));
}
