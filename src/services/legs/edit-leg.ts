import { eq } from "drizzle-orm";
import { lengthOf } from "@/core/geometry/polyline";
import { moveStopLine, SHORTEST_LEG_M } from "@/core/legs/reshape";
import { legs } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { EditLeg } from "@/domain/leg-check";
import { requirePermission, type Context } from "../context";
import { noteLegEdit } from "./leg-edits";
import { afterLegChange, junctionName, lockLeg, type StoredLeg } from "./leg-rows";

/** Changes what an engineer knows better than the pings; whatever is given stays through later uploads. */
export async function editLeg(ctx: Context, input: EditLeg): Promise<{ rematching: boolean }> {
  requirePermission(ctx, "leg.edit");
  const edit = EditLeg.parse(input);
  return ctx.db.transaction(async (tx) => {
    await noteLegEdit(tx);
    const leg = await lockLeg(tx, edit.legId);
    const changes = changesOf(leg, edit);
    await tx.update(legs).set(changes).where(eq(legs.id, leg.id));
    // Name and lock move no figure.
    const rematching = "line" in changes || "storageM" in changes || "speedLimitMs" in changes;
    const subject = `${await junctionName(tx, leg.junctionId)}, ${changes.name ?? leg.name}`;
    await afterLegChange(ctx, tx, { junctionId: leg.junctionId, action: "changed leg", subject, detail: { ...edit }, rematch: rematching });
    return { rematching };
  });
}

function changesOf(leg: StoredLeg, edit: EditLeg): Partial<StoredLeg> {
  const changes: Partial<StoredLeg> = {};
  if (edit.name !== undefined) changes.name = edit.name;
  if (edit.locked !== undefined) changes.locked = edit.locked;
  if (edit.lanes !== undefined) changes.lanes = edit.lanes;
  if (edit.speedLimitKmh !== undefined) changes.speedLimitMs = edit.speedLimitKmh === null ? null : edit.speedLimitKmh / 3.6;
  if (edit.storageM !== undefined) changes.storageM = edit.storageM ?? storageOfStreet(leg);
  if (edit.stopLineShiftM) {
    const line = moveStopLine(Float64Array.from(leg.line), edit.stopLineShiftM);
    if (line === null) throw new AppError("invalid", `The leg is too short to move its stop line by ${edit.stopLineShiftM} m: ${SHORTEST_LEG_M} m must remain.`);
    changes.line = Array.from(line);
    changes.stopLineOrigin = "set";
    const storage = changes.storageM ?? leg.storageM;
    if (storage !== null) changes.storageM = Math.max(5, storage - edit.stopLineShiftM);
  }
  // A leg that somebody corrected by hand is not for the next file to change.
  if (edit.locked === undefined && Object.keys(changes).length > 0) changes.locked = true;
  if (changes.locked) changes.doubts = [];
  return changes;
}

/** As for derived legs: the street between the two junctions, where there is one behind. */
function storageOfStreet(leg: StoredLeg): number | null {
  return leg.upstreamExitId === null ? null : lengthOf(leg.line);
}
