import { and, eq, isNull, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { feedTokens } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { BATCHES_PER_MINUTE } from "@/domain/feed";
import { hashToken } from "../auth/tokens";

export interface Feed {
  tokenId: string;
  supplierId: number;
}

/** Whose token it is. Counts the call in the same statement, so that calls side by side cannot slip through. */
export async function openFeed(db: Db, token: string | null, now: Date): Promise<Feed> {
  const minuteStart = new Date(Math.floor(now.getTime() / 60_000) * 60_000);
  const [row] = token
    ? await db
        .update(feedTokens)
        .set({
          lastUsedAt: now,
          minuteStart,
          minuteBatches: sql`case when ${feedTokens.minuteStart} = ${minuteStart.toISOString()}::timestamptz then ${feedTokens.minuteBatches} + 1 else 1 end`,
        })
        .where(and(eq(feedTokens.tokenHash, hashToken(token)), isNull(feedTokens.revokedAt)))
        .returning({ tokenId: feedTokens.id, supplierId: feedTokens.supplierId, minuteBatches: feedTokens.minuteBatches })
    : [];
  if (!row) throw new AppError("unauthenticated", "Send a valid token: authorization: Bearer and the token that was shown when it was made.");
  if (row.minuteBatches > BATCHES_PER_MINUTE) {
    throw new AppError("too_many", `More than ${BATCHES_PER_MINUTE} batches came with this token within a minute. Wait a minute, and gather more pings in a batch.`);
  }
  return row;
}
