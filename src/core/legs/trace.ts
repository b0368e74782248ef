import { angleBetweenDeg } from "@/core/geometry/angles";
import { latAt, lonAt, type Plane } from "@/core/geometry/plane";
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

/** A trace on its way: present place and outward direction, the line so far and how much of it pings support. */
interface Trail {
  x: number;
  y: number;
  ux: number;
  uy: number;
  line: number[];
  supported: number;
  gapM: number;
  bends: number;
}

type See = (x: number, y: number, ux: number, uy: number, along: number, side: number) => Look;

/** Follows a seed's pings outward, bending with them, until they end, another junction is met or the limit is reached. */
export function traceArm(seed: Seed, frame: Frame, grid: PingGrid, isSparse: boolean): Arm {
  const plane = frame.planes[seed.junction];
  const sign = seed.inbound ? -1 : 1;
  const scratch = new Uint32Array(MOST_PINGS);
  const see: See = (x, y, ux, uy, along, side) => look(grid, plane, scratch, sign, x, y, ux, uy, along, side);
  const trail = startTrail(sign * Math.sin(seed.bearingDeg * RAD), sign * Math.cos(seed.bearingDeg * RAD), see);
  const mostGapM = isSparse ? LEARNING.sparseGapM : LEARNING.gapM;
  let meets = -1;
  for (let far = 0; far < LEARNING.traceMostM; far += LEARNING.stepM) {
    if (trail.gapM > mostGapM) {
      far -= trail.gapM;
      if (!goRoundBend(trail, grid, plane, scratch, sign)) break;
    }
    meets = junctionAhead(frame, seed.junction, trail.x, trail.y, trail.ux, trail.uy);
    if (meets >= 0) break;
    stepOn(trail, see);
  }
  const { line, supported } = trail;
  const kept = meets >= 0 ? cutAtBox(line, frame, seed.junction, meets) : line.slice(0, 2 * Math.max(supported, LEARNING.leastPoints));
  return { junction: seed.junction, inbound: seed.inbound, support: seed.support, line: kept, meets };
}

/** At the edge of the box, moved sideways and turned to the pings that lie ahead. */
function startTrail(seedUx: number, seedUy: number, see: See): Trail {
  const start = see(35 * seedUx, 35 * seedUy, seedUx, seedUy, 25, 18);
  const x = LEARNING.boxM * seedUx + start.side * seedUy;
  const y = LEARNING.boxM * seedUy - start.side * seedUx;
  const isTurned = start.ux !== 0 || start.uy !== 0;
  const [ux, uy] = isTurned ? [start.ux, start.uy] : [seedUx, seedUy];
  return { x, y, ux, uy, line: [x, y], supported: 1, gapM: 0, bends: 0 };
}

/** One step outwards: straight on where no ping lies, else to the middle of those that do. */
function stepOn(trail: Trail, see: See): void {
  trail.x += LEARNING.stepM * trail.ux;
  trail.y += LEARNING.stepM * trail.uy;
  const { gapM } = trail;
  const seen = see(
    trail.x, trail.y, trail.ux, trail.uy,
    LEARNING.stepM + Math.min(5, gapM / 5), LEARNING.sideM + Math.min(6, gapM / 10),
  );
  const gain = seen.count / (seen.count + 2);
  trail.x += gain * seen.side * trail.uy;
  trail.y -= gain * seen.side * trail.ux;
  trail.line.push(trail.x, trail.y);
  trail.gapM = seen.count === 0 ? gapM + LEARNING.stepM : 0;
  if (seen.count === 0) return;
  trail.supported = trail.line.length / 2;
  [trail.ux, trail.uy] = turnTowards(trail.line, trail.ux, trail.uy, seen, gain);
}

/** Takes the trail back to its last ping and round the corner there; false where there is none. */
function goRoundBend(trail: Trail, grid: PingGrid, plane: Plane, scratch: Uint32Array, sign: number): boolean {
  if (trail.supported <= 2 || trail.bends >= LEARNING.mostBends) return false;
  const [x, y, ux, uy] = lastDirection(trail.line.slice(0, 2 * trail.supported));
  const bend = findBend(grid, plane, scratch, sign, x, y, ux, uy);
  if (!bend) return false;
  trail.line.length = 2 * trail.supported;
  trail.line.push(bend.x, bend.y);
  Object.assign(trail, bend, { supported: trail.line.length / 2, gapM: 0, bends: trail.bends + 1 });
  return true;
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
  const { lat, lon, headingDeg } = grid.trips;
  const outwardDeg = Math.atan2(ux, uy) / RAD;
  const atLat = latAt(plane, y);
  const atLon = lonAt(plane, x);
  const found = pingsAround(grid, atLat, atLon, Math.max(along, side), plane, scratch);
  const seen = { count: 0, side: 0, ux: 0, uy: 0 };
  let total = 0;
  for (let n = 0; n < found; n++) {
    const i = scratch[n];
    const dx = (lon[i] - atLon) * plane.metresPerLon;
    const dy = (lat[i] - atLat) * plane.metresPerLat;
    const right = dx * uy - dy * ux;
    const ahead = dx * ux + dy * uy;
    if (right > side || right < -side || ahead > along || ahead < -along) continue;
    const heading = headingDeg[i];
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

/** Between junctions so near that a trace meets the next one at its first point: a straight line to its box, of some length at least. */
function straightTo(line: number[], other: { x: number; y: number }): number[] {
  const [dx, dy] = [other.x - line[0], other.y - line[1]];
  const distance = Math.hypot(dx, dy);
  const share = Math.max(LEARNING.leastLinkM, distance - LEARNING.boxM) / distance;
  return [line[0], line[1], line[0] + share * dx, line[1] + share * dy];
}

/** Ends the line where it enters the met junction's box, judged along its own direction there. */
function cutAtBox(line: number[], frame: Frame, own: number, meets: number): number[] {
  const other = frame.near[own].find((n) => n.junction === meets);
  const n = line.length;
  if (!other) return line;
  if (n < 4) return straightTo(line, other);
  const back = Math.max(0, n - 6);
  const length = Math.hypot(line[n - 2] - line[back], line[n - 1] - line[back + 1]) || 1;
  const ux = (line[n - 2] - line[back]) / length;
  const uy = (line[n - 1] - line[back + 1]) / length;
  const ahead = (other.x - line[n - 2]) * ux + (other.y - line[n - 1]) * uy - LEARNING.boxM;
  const whole = Float64Array.from(line);
  const end = lengthOf(whole) + ahead;
  return end < LEARNING.stepM ? line : [...slice(whole, 0, end)];
}
