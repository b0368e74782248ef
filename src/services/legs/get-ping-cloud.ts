import { desc, eq } from "drizzle-orm";
import { decodeNearPings } from "@/core/pings/near-sample";
import { pingClouds, uploads } from "@/db/schema";
import { notFound } from "@/domain/errors";
import type { PingCloud } from "@/domain/leg-check";
import { RowKey } from "@/domain/row-key";
import { requirePermission, type Context } from "../context";

/** Newest uploads whose samples are shown together: enough to see every street, few enough to draw. */
const MOST_UPLOADS = 4;

export async function getPingCloud(ctx: Context, input: { junctionId: string | number }): Promise<PingCloud> {
  requirePermission(ctx, "leg.view");
  const id = RowKey.safeParse(input.junctionId);
  if (!id.success) throw notFound("Junction", input.junctionId);
  const rows = await ctx.db
    .select({ payload: pingClouds.payload })
    .from(pingClouds)
    .innerJoin(uploads, eq(uploads.id, pingClouds.uploadId))
    .where(eq(pingClouds.junctionId, id.data))
    .orderBy(desc(uploads.createdAt), desc(uploads.id))
    .limit(MOST_UPLOADS);
  const cloud: PingCloud = { eastM: [], northM: [], headingDeg: [], speedMs: [] };
  const orNull = (value: number) => (Number.isNaN(value) ? null : Math.round(value * 10) / 10);
  for (const { payload } of rows) {
    const near = decodeNearPings(payload);
    for (let i = 0; i < near.length; i++) {
      cloud.eastM.push(Math.round(near.eastM[i] * 10) / 10);
      cloud.northM.push(Math.round(near.northM[i] * 10) / 10);
      cloud.headingDeg.push(orNull(near.headingDeg[i]));
      cloud.speedMs.push(orNull(near.speedMs[i]));
    }
  }
  return cloud;
}
