import { angleBetweenDeg, signedTurnDeg } from "@/core/geometry/angles";
import { eastM, latAt, lonAt, northM, type Plane } from "@/core/geometry/plane";
import { pingsAround, type PingGrid } from "@/core/legs/ping-grid";

/** Settings for streets that bend more sharply than a trace can follow. Metres and degrees. */
const LOOK_M = 38;
const AHEAD_M = 12;
const LEAST_BEND_DEG = 25;
const MOST_BEND_DEG = 125;
/** A vehicle went round the bend when it was on the line within so many pings, this near to it, pointing along it. */
const NEXT_PINGS = 5;
const BESIDE_M = 15;
const BACK_M = 60;
const ALONG_DEG = 35;
const MOST_STEP_S = 40;
const LEAST_PINGS = 2;
const RAD = Math.PI / 180;

export interface Bend {
  x: number;
  y: number;
  /** Outward direction after the bend. */
  ux: number;
  uy: number;
}

/**
 * Where a traced street goes on round a corner: pings beside its end that point another way and whose vehicles were on
 * the traced line just before (outbound) or after (inbound). Null where none did. `sign` is 1 outbound, -1 inbound.
 */
export function findBend(
  grid: PingGrid, plane: Plane, scratch: Uint32Array, sign: number, x: number, y: number, ux: number, uy: number,
): Bend | null {
  const { trips } = grid;
  const outwardDeg = Math.atan2(ux, uy) / RAD;
  const found = pingsAround(grid, latAt(plane, y + AHEAD_M * uy), lonAt(plane, x + AHEAD_M * ux), LOOK_M, plane, scratch);
  const sides = [newSide(), newSide()];
  for (let n = 0; n < found; n++) {
    const i = scratch[n];
    const heading = trips.headingDeg[i];
    if (!(heading >= 0)) continue;
    const travelDeg = sign > 0 ? heading : heading + 180;
    const turn = signedTurnDeg(outwardDeg, travelDeg);
    if (Math.abs(turn) < LEAST_BEND_DEG || Math.abs(turn) > MOST_BEND_DEG) continue;
    const px = eastM(plane, trips.lon[i]);
    const py = northM(plane, trips.lat[i]);
    if ((px - x) * ux + (py - y) * uy < -AHEAD_M || !cameAlong(grid, plane, sign, i, x, y, ux, uy)) continue;
    const side = sides[turn > 0 ? 1 : 0];
    side.count += 1;
    side.x += px;
    side.y += py;
    side.ux += Math.sin(travelDeg * RAD);
    side.uy += Math.cos(travelDeg * RAD);
  }
  const side = sides[0].count >= sides[1].count ? sides[0] : sides[1];
  const norm = Math.hypot(side.ux, side.uy);
  if (side.count < LEAST_PINGS || norm === 0) return null;
  return { x: side.x / side.count, y: side.y / side.count, ux: side.ux / norm, uy: side.uy / norm };
}

const newSide = (): Bend & { count: number } => ({ count: 0, x: 0, y: 0, ux: 0, uy: 0 });

/** Whether the vehicle of ping i was on the last stretch of the line a few pings earlier (outbound) or later (inbound). */
function cameAlong(grid: PingGrid, plane: Plane, sign: number, i: number, x: number, y: number, ux: number, uy: number): boolean {
  const { trips } = grid;
  const outwardDeg = Math.atan2(ux, uy) / RAD;
  for (let n = 1; n <= NEXT_PINGS; n++) {
    const k = i - sign * n;
    // The neighbour in the columns may belong to another trip: then its time jumps.
    if (k < 0 || k >= trips.length) return false;
    const seconds = ((trips.tMs[i] - trips.tMs[k]) * sign) / 1000;
    if (!(seconds > 0 && seconds <= MOST_STEP_S * n)) return false;
    const dx = eastM(plane, trips.lon[k]) - x;
    const dy = northM(plane, trips.lat[k]) - y;
    const along = dx * ux + dy * uy;
    if (along > 5 || along < -BACK_M || Math.abs(dx * uy - dy * ux) > BESIDE_M) continue;
    const travelDeg = sign > 0 ? trips.headingDeg[k] : trips.headingDeg[k] + 180;
    if (angleBetweenDeg(travelDeg, outwardDeg) < ALONG_DEG) return true;
  }
  return false;
}
