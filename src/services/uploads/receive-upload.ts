import { createHash, randomUUID } from "node:crypto";
import { and, desc, eq, ne } from "drizzle-orm";
import { z } from "zod";
import { uploads } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { UPLOAD_KINDS, type Detection } from "@/domain/upload";
import { detect } from "@/formats/detect/detect";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";
import { orNoRoom } from "../no-room";

export const ReceiveUpload = z.object({
  kind: z.enum(UPLOAD_KINDS),
  name: z.string().trim().min(1, "The file has no name.").max(200),
});
export type ReceiveUpload = z.infer<typeof ReceiveUpload>;

export interface ReceivedUpload {
  uploadId: string;
  detected: Detection;
  /** An earlier upload of the very same bytes. */
  sameAs: { id: string; createdAt: string } | null;
}

const HEAD_BYTES = 256 * 1024;

/** Streams a file to storage and says what it seems to be; nothing is read in until the person starts it. */
export async function receiveUpload(ctx: Context, input: ReceiveUpload, content: AsyncIterable<Uint8Array>): Promise<ReceivedUpload> {
  requirePermission(ctx, "upload.create");
  const { kind, name } = ReceiveUpload.parse(input);
  const uploadId = randomUUID();
  const storageKey = `uploads/${uploadId}`;
  const hash = createHash("sha256");
  const head: Uint8Array[] = [];
  let headBytes = 0;
  async function* watched(): AsyncGenerator<Uint8Array> {
    for await (const chunk of content) {
      hash.update(chunk);
      if (headBytes < HEAD_BYTES) {
        head.push(chunk.slice(0, HEAD_BYTES - headBytes));
        headBytes += head[head.length - 1].length;
      }
      yield chunk;
    }
  }
  const bytes = await ctx.storage.put(storageKey, watched()).catch((error: unknown) => {
    throw orNoRoom(error);
  });
  if (bytes === 0) {
    await ctx.storage.remove(storageKey);
    throw new AppError("invalid", `The file ${name} is empty.`);
  }
  const sha256 = hash.digest("hex");
  try {
    const detected = await detect(Buffer.concat(head), name, kind);
    const sameAs = await findSame(ctx, kind, sha256);
    await ctx.db.transaction(async (tx) => {
      await tx.insert(uploads).values({
        id: uploadId,
        kind,
        fileName: name,
        storageKey,
        bytes,
        sha256,
        mapping: detected.mapping,
        state: "received",
        createdBy: ctx.actor.type === "user" ? ctx.actor.userId : null,
        createdAt: ctx.now,
      });
      await recordAudit(tx, ctx, { action: "received file", subject: name, detail: { uploadId, kind, bytes } });
    });
    return { uploadId, detected, sameAs };
  } catch (error) {
    await ctx.storage.remove(storageKey);
    throw error;
  }
}

async function findSame(ctx: Context, kind: ReceiveUpload["kind"], sha256: string): Promise<ReceivedUpload["sameAs"]> {
  const [same] = await ctx.db
    .select({ id: uploads.id, createdAt: uploads.createdAt })
    .from(uploads)
    .where(and(eq(uploads.sha256, sha256), eq(uploads.kind, kind), ne(uploads.state, "failed"), ne(uploads.state, "received")))
    .orderBy(desc(uploads.createdAt))
    .limit(1);
  return same ? { id: same.id, createdAt: same.createdAt.toISOString() } : null;
}
