import { eq } from "drizzle-orm";
import { METHOD_VERSION } from "@/core/method-version";
import { legBearingDeg, legName } from "@/core/legs/draft";
import { junctions, legs } from "@/db/schema";
import type { Db } from "@/db/client";
import { AppError } from "@/domain/errors";
import { AddLeg, MergeLegs, SplitLeg } from "@/domain/leg-check";
import { requirePermission, type Context } from "../context";
import { noteLegEdit } from "./leg-edits";
import { afterLegChange, junctionName, lockLeg, settleLegs, type StoredLeg } from "./leg-rows";

/** Two legs that are one street in truth: the second goes, its vehicles are matched to the first. */
export async function mergeLegs(ctx: Context, input: MergeLegs): Promise<void> {
  requirePermission(ctx, "leg.edit");
  const { keepId, dropId } = MergeLegs.parse(input);
  await ctx.db.transaction(async (tx) => {
    await noteLegEdit(tx);
    const keep = await lockLeg(tx, keepId);
    const drop = await lockLeg(tx, dropId);
    if (keep.junctionId !== drop.junctionId) throw new AppError("invalid", "Only two legs of one junction can be merged.");
    await tx.delete(legs).where(eq(legs.id, drop.id));
    await settleLegs(tx, keep.junctionId);
    const subject = `${await junctionName(tx, keep.junctionId)}, ${keep.name}`;
    await afterLegChange(ctx, tx, { junctionId: keep.junctionId, action: "merged legs", subject, detail: { dropped: drop.name }, rematch: true });
  });
}

/** One derived leg that is two streets in truth: the first line keeps its identity. */
export async function splitLeg(ctx: Context, input: SplitLeg): Promise<{ legId: number }> {
  requirePermission(ctx, "leg.edit");
  const { legId, first, second } = SplitLeg.parse(input);
  return ctx.db.transaction(async (tx) => {
    await noteLegEdit(tx);
    const leg = await lockLeg(tx, legId);
    await tx.update(legs).set({ ...shapeOf(first.flat()), stopLineOrigin: "set" }).where(eq(legs.id, leg.id));
    const added = await insertLeg(tx, leg, second.flat(), null);
    await settleLegs(tx, leg.junctionId);
    const subject = `${await junctionName(tx, leg.junctionId)}, ${leg.name}`;
    await afterLegChange(ctx, tx, { junctionId: leg.junctionId, action: "split leg", subject, detail: { added }, rematch: true });
    return { legId: added };
  });
}

/** A leg that the pings did not show, drawn by hand. */
export async function addLeg(ctx: Context, input: AddLeg): Promise<{ legId: number }> {
  requirePermission(ctx, "leg.edit");
  const { junctionId, name, line } = AddLeg.parse(input);
  return ctx.db.transaction(async (tx) => {
    await noteLegEdit(tx);
    const junction = await junctionName(tx, junctionId);
    const added = await insertLeg(tx, { junctionId, storageM: null, freeSpeedMs: null, upstreamExitId: null }, line.flat(), name);
    await settleLegs(tx, junctionId);
    await afterLegChange(ctx, tx, { junctionId, action: "added leg", subject: `${junction}, ${name}`, detail: { added }, rematch: true });
    return { legId: added };
  });
}

type LegBase = Pick<StoredLeg, "junctionId" | "storageM" | "freeSpeedMs" | "upstreamExitId">;

async function insertLeg(db: Db, base: LegBase, line: number[], name: string | null): Promise<number> {
  const shape = shapeOf(line);
  const [junction] = await db.select({ code: junctions.code }).from(junctions).where(eq(junctions.id, base.junctionId));
  const taken = new Set((await db.select({ code: legs.code }).from(legs).where(eq(legs.junctionId, base.junctionId))).map((row) => row.code));
  const stem = `${junction.code}:in:${String(Math.round(shape.bearingDeg) % 360).padStart(3, "0")}`;
  let code = stem;
  for (let n = 2; taken.has(code); n++) code = `${stem}-${n}`;
  const [row] = await db
    .insert(legs)
    .values({
      ...base,
      ...shape,
      code,
      name: name ?? `${legName(shape.bearingDeg)} (${Math.round(shape.bearingDeg)}°)`,
      origin: "set",
      stopLineOrigin: "set",
      locked: true,
      support: 0,
      doubts: [],
      methodVersion: METHOD_VERSION,
    })
    .returning({ id: legs.id });
  return row.id;
}

function shapeOf(line: number[]): { line: number[]; bearingDeg: number } {
  return { line, bearingDeg: legBearingDeg(Float64Array.from(line)) };
}
