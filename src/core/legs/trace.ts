import { angleBetweenDeg } from "@/core/geometry/angles";
import { eastM, latAt, lonAt, northM, type Plane } from "@/core/geometry/plane";
import { lengthOf, slice } from "@/core/geometry/polyline";
import { findBend } from "@/core/legs/bend";
import type { Frame } from "@/core/legs/frame";
import { LEARNING } from "@/core/legs/learning";
import { pingsAround, type PingGrid } from "@/core/legs/ping-grid";
import type { Seed } from "@/core/legs/seeds";

/** One side of a street, followed from its junction outwards. */
export interface Arm {
  junction: number;
  inbound: boolean;
  support: number;
  /** From the edge of the junction's box outwards, in its plane. */
  line: number[];
  /** The junction at the far end; -1 where the trace ended in the open. */
  meets: number;
}

interface Look {
  count: number;
  /** Weighted mean distance to the right of the outward direction. */
  side: number;
  /** Mean outward direction of the pings' travel; both 0 without any heading. */
  ux: number;
  uy: number;
}

const RAD = Math.PI / 180;
const MOST_PINGS = 4000;

/** Follows a seed's pings outward, bending with them, until they end, another junction is met or the limit is reached. */
export function traceArm(seed: Seed, frame: Frame, grid: PingGrid, isSparse: boolean): Arm {
  const plane = frame.planes[seed.junction];
  const sign = seed.inbound ? -1 : 1;
  const scratch = new Uint32Array(MOST_PINGS);
  const see = (x: number, y: number, ux: number, uy: number, along: number, side: number): Look =>
    look(grid, plane, scratch, sign, x, y, ux, uy, along, side);

  let ux = sign * Math.sin(seed.bearingDeg * RAD);
  let uy = sign * Math.cos(seed.bearingDeg * RAD);
  const start = see(35 * ux, 35 * uy, ux, uy, 25, 18);
  const offset = start.count > 0 ? start.side : 0;
  let x = LEARNING.boxM * ux + offset * uy;
  let y = LEARNING.boxM * uy - offset * ux;
  if (start.ux !== 0 || start.uy !== 0) [ux, uy] = [start.ux, start.uy];
  const line = [x, y];
  let supported = 1;
  let gap = 0;
  let meets = -1;
  let bends = 0;
  const gapM = isSparse ? LEARNING.sparseGapM : LEARNING.gapM;
  for (let far = LEARNING.stepM; far <= LEARNING.traceMostM; far += LEARNING.stepM) {
    if (gap > gapM) {
      const [endX, endY, endUx, endUy] = lastDirection(line.slice(0, 2 * supported));
      const mayBend = supported > 2 && bends < LEARNING.mostBends;
      const bend = mayBend ? findBend(grid, plane, scratch, sign, endX, endY, endUx, endUy) : null;
      if (!bend) break;
      bends += 1;
      [x, y, ux, uy] = [bend.x, bend.y, bend.ux, bend.uy];
      line.length = 2 * supported;
      line.push(x, y);
      supported = line.length / 2;
      far -= gap;
      gap = 0;
    }
    meets = junctionAhead(frame, seed.junction, x, y, ux, uy);
    if (meets >= 0) break;
    x += LEARNING.stepM * ux;
    y += LEARNING.stepM * uy;
    const seen = see(x, y, ux, uy, LEARNING.stepM + Math.min(5, gap / 5), LEARNING.sideM + Math.min(6, gap / 10));
    if (seen.count === 0) {
      gap += LEARNING.stepM;
      line.push(x, y);
      continue;
    }
    gap = 0;
    const gain = seen.count / (seen.count + 2);
    x += gain * seen.side * uy;
    y -= gain * seen.side * ux;
    line.push(x, y);
    supported = line.length / 2;
    [ux, uy] = turnTowards(line, ux, uy, seen, gain);
  }
  const line2 = meets >= 0 ? cutAtBox(line, frame, seed.junction, meets) : line.slice(0, 2 * Math.max(supported, LEARNING.leastPoints));
  return { junction: seed.junction, inbound: seed.inbound, support: seed.support, line: line2, meets };
}

/** Last point of a line and the direction of its last 20 m. */
function lastDirection(line: number[]): [number, number, number, number] {
  const n = line.length;
  const back = Math.max(0, n - 6);
  const length = Math.hypot(line[n - 2] - line[back], line[n - 1] - line[back + 1]) || 1;
  return [line[n - 2], line[n - 1], (line[n - 2] - line[back]) / length, (line[n - 1] - line[back + 1]) / length];
}

/** Blends the old direction with that of the last 20 m of the line and of the pings' headings. */
function turnTowards(line: number[], ux: number, uy: number, seen: Look, gain: number): [number, number] {
  const n = line.length;
  const back = Math.max(0, n - 6);
  const dx = line[n - 2] - line[back];
  const dy = line[n - 1] - line[back + 1];
  const length = Math.hypot(dx, dy) || 1;
  const vx = ux + gain * (dx / length + 1.5 * seen.ux);
  const vy = uy + gain * (dy / length + 1.5 * seen.uy);
  const norm = Math.hypot(vx, vy) || 1;
  return [vx / norm, vy / norm];
}

function look(
  grid: PingGrid, plane: Plane, scratch: Uint32Array, sign: number,
  x: number, y: number, ux: number, uy: number, along: number, side: number,
): Look {
  const { trips } = grid;
  const outwardDeg = Math.atan2(ux, uy) / RAD;
  const found = pingsAround(grid, latAt(plane, y), lonAt(plane, x), Math.max(along, side), plane, scratch);
  const seen = { count: 0, side: 0, ux: 0, uy: 0 };
  let total = 0;
  for (let n = 0; n < found; n++) {
    const i = scratch[n];
    const dx = eastM(plane, trips.lon[i]) - x;
    const dy = northM(plane, trips.lat[i]) - y;
    const right = dx * uy - dy * ux;
    if (Math.abs(dx * ux + dy * uy) > along || Math.abs(right) > side) continue;
    const heading = trips.headingDeg[i];
    if (!(heading >= 0)) continue;
    const travelDeg = sign > 0 ? heading : heading + 180;
    const off = angleBetweenDeg(travelDeg, outwardDeg);
    if (off > LEARNING.traceHeadingDeg) continue;
    const weight = Math.exp(-0.5 * ((right / LEARNING.sideSpreadM) ** 2 + (off / LEARNING.traceSpreadDeg) ** 2));
    total += weight;
    seen.count += 1;
    seen.side += weight * right;
    seen.ux += weight * Math.sin(travelDeg * RAD);
    seen.uy += weight * Math.cos(travelDeg * RAD);
  }
  if (total > 0) seen.side /= total;
  const norm = Math.hypot(seen.ux, seen.uy);
  if (norm > 0) {
    seen.ux /= norm;
    seen.uy /= norm;
  }
  return seen;
}

/** The junction whose point the next step would pass, -1 for none. */
function junctionAhead(frame: Frame, own: number, x: number, y: number, ux: number, uy: number): number {
  for (const other of frame.near[own]) {
    const dx = other.x - x;
    const dy = other.y - y;
    const along = dx * ux + dy * uy;
    if (along > -6 && along <= LEARNING.stepM + 6 && Math.abs(dx * uy - dy * ux) < LEARNING.meetsWithinM) return other.junction;
  }
  return -1;
}

/** Ends the line where it enters the met junction's box, judged along its own direction there. */
function cutAtBox(line: number[], frame: Frame, own: number, meets: number): number[] {
  const other = frame.near[own].find((n) => n.junction === meets);
  const n = line.length;
  if (!other || n < 4) return line;
  const back = Math.max(0, n - 6);
  const length = Math.hypot(line[n - 2] - line[back], line[n - 1] - line[back + 1]) || 1;
  const ux = (line[n - 2] - line[back]) / length;
  const uy = (line[n - 1] - line[back + 1]) / length;
  const ahead = (other.x - line[n - 2]) * ux + (other.y - line[n - 1]) * uy - LEARNING.boxM;
  const whole = Float64Array.from(line);
  const end = lengthOf(whole) + ahead;
  return end < LEARNING.stepM ? line : [...slice(whole, 0, end)];
}
