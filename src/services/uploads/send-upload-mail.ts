import { eq } from "drizzle-orm";
import { uploads, users } from "@/db/schema";
import { AppError } from "@/domain/errors";
import type { Context } from "../context";

/** Runs in the worker once a file is in or has failed; silent when nobody is there to be told. */
export async function sendUploadMail(ctx: Context, input: { uploadId: string }): Promise<void> {
  if (ctx.actor.type !== "job") throw new AppError("forbidden", "Mail about files is sent by the worker only.");
  const [row] = await ctx.db
    .select({
      fileName: uploads.fileName,
      state: uploads.state,
      failure: uploads.failure,
      report: uploads.report,
      email: users.email,
      name: users.name,
      disabledAt: users.disabledAt,
    })
    .from(uploads)
    .innerJoin(users, eq(users.id, uploads.createdBy))
    .where(eq(uploads.id, input.uploadId));
  if (!row || row.disabledAt !== null) return;
  const rejected = Object.values(row.report?.rejected ?? {}).reduce((sum, count) => sum + count, 0);
  const isIn = row.state === "done";
  await ctx.mailer.send({
    to: row.email,
    subject: isIn ? `${row.fileName} is in` : `${row.fileName} could not be read in`,
    text: [
      `Good day ${row.name},`,
      isIn
        ? `${row.report?.rowsRead ?? 0} rows were read, ${row.report?.accepted ?? 0} accepted and ${rejected} rejected.`
        : (row.failure ?? "The file could not be read in."),
      `The report: ${ctx.baseUrl}/data/${input.uploadId}`,
    ].join("\n\n"),
  });
}
