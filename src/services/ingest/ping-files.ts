import { and, asc, eq } from "drizzle-orm";
import type { Db } from "@/db/client";
import { uploads } from "@/db/schema";
import type { PingUpload } from "./read-file";
import type { Span } from "./steps/cut-time";

/** Every pings file that was read in, in order of receipt: references rest on it, so two runs must see the same. */
export async function pingFiles(db: Db): Promise<(PingUpload & { span: Span })[]> {
  const files = await db
    .select({ id: uploads.id, storageKey: uploads.storageKey, mapping: uploads.mapping, supplierId: uploads.supplierId, feedHour: uploads.feedHour, report: uploads.report })
    .from(uploads)
    .where(and(eq(uploads.kind, "pings"), eq(uploads.state, "done")))
    .orderBy(asc(uploads.createdAt), asc(uploads.receivedNo));
  return files.flatMap(({ mapping, supplierId, feedHour, report, ...file }) => {
    const span = { firstMs: Date.parse(report?.firstAt ?? ""), lastMs: Date.parse(report?.lastAt ?? "") };
    return mapping ? [{ ...file, mapping, span, supplierId: feedHour === null && span.firstMs <= span.lastMs ? supplierId : null }] : [];
  });
}
