import { eq } from "drizzle-orm";
import { METHOD_VERSION } from "@/core/method-version";
import { lengthOf } from "@/core/geometry/polyline";
import { legBearingDeg, legName } from "@/core/legs/draft";
import { SHORTEST_LEG_M } from "@/core/legs/reshape";
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
  const { junctionId, storageM, freeSpeedMs, upstreamExitId } = base;
  const [junction] = await db.select({ code: junctions.code }).from(junctions).where(eq(junctions.id, junctionId));
  const taken = new Set((await db.select({ code: legs.code }).from(legs).where(eq(legs.junctionId, junctionId))).map((row) => row.code));
  const stem = `${junction.code}:in:${String(Math.round(shape.bearingDeg) % 360).padStart(3, "0")}`;
  let code = stem;
  for (let n = 2; taken.has(code); n++) code = `${stem}-${n}`;
  const [row] = await db
    .insert(legs)
    .values({
      junctionId,
      storageM,
      freeSpeedMs,
      upstreamExitId,
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

/** Farthest that a stop line is drawn from its junction's point, m. */
const FARTHEST_STOP_LINE_M = 150;

function shapeOf(line: number[]): { line: number[]; bearingDeg: number } {
  const drawn = Float64Array.from(line);
  const lengthM = lengthOf(drawn);
  if (lengthM < SHORTEST_LEG_M) throw new AppError("invalid", `The line is ${Math.round(lengthM)} m long: a leg needs at least ${SHORTEST_LEG_M} m.`);
  const beginM = Math.hypot(line[0], line[1]);
  if (beginM > FARTHEST_STOP_LINE_M) throw new AppError("invalid", `The line begins ${Math.round(beginM)} m from the junction: its first point is the stop line.`);
  if (beginM > Math.hypot(line[line.length - 2], line[line.length - 1])) {
    throw new AppError("invalid", "The line ends nearer to the junction than it begins: draw it from the stop line upstream.");
  }
  return { line, bearingDeg: legBearingDeg(drawn) };
}
