import type { KeptMailView } from "@/domain/people";
import { requirePermission, type Context } from "../context";

const MAX_MAILS = 100;

/** Newest first; null where mail really goes out and none is kept. */
export async function listKeptMail(ctx: Context): Promise<KeptMailView[] | null> {
  requirePermission(ctx, "mail.view");
  const mails = await ctx.mailer.listKept(MAX_MAILS);
  return mails && mails.map(({ id, receivedAt, to, subject, text }) => ({ id, receivedAt, to, subject, text }));
}
