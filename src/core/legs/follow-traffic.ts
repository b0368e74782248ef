import { angleBetweenDeg, bearingDeg } from "@/core/geometry/angles";
import { eastM, latAt, lonAt, northM } from "@/core/geometry/plane";
import { lengthOf, pointAt, projectPoint, simplify, slice } from "@/core/geometry/polyline";
import type { Frame } from "@/core/legs/frame";
import { LEARNING } from "@/core/legs/learning";
import { pingsAround, type PingGrid } from "@/core/legs/ping-grid";
import type { Arm } from "@/core/legs/trace";

/** Settings for traces that missed the way of their own traffic. Metres, degrees. */
export const FOLLOWING = Object.freeze({
  /** Trips of an arm are known by a ping this near to a place this far out, along the line. */
  anchorM: 45,
  anchorReachM: 30,
  besideM: 14,
  alongDeg: 35,
  /** A trip has left the line this far beside it, if that happens before the line's last stretch. */
  asideM: 25,
  lastM: 30,
  /** Departures this near to each other are one fork. */
  forkM: 45,
  /** Fewest trips that take it, and how many times as many as go on along the line: a street goes on straight while anybody does. */
  leastTrips: 3,
  timesStraight: 15,
  /** Steps between pings longer than this tell no way. */
  mostStepM: 130,
  /** Movements below this are noise of standing. */
  leastStepM: 8,
  mostPings: 600,
  /** Pings are held against a line without vertices this near to the rest of it, far below the distances above. */
  simplifyM: 1,
});

/** One trip's way outwards from its anchor: distance driven along the arm, and where. */
interface Way {
  at: number[];
  x: number[];
  y: number[];
  /** Where it was last seen on the line, and where it left it; NaN where it did not. */
  onLineM: number;
  leftM: number;
}

/**
 * A trace goes where pings lie, whoever made them; at a fork without a signal it may follow another street than that of
 * the traffic which passes its junction. Where most of that traffic leaves the line at one place, the arm goes on along
 * the middle of their ways. For pings dense enough to tell a way. O(trips of the arm × pings on their ways).
 */
export function followTraffic(arm: Arm, frame: Frame, grid: PingGrid): Arm {
  const line = Float64Array.from(arm.line);
  const lengthM = lengthOf(line);
  if (lengthM < FOLLOWING.anchorM) return arm;
  const ways = waysOf(arm, simplify(line, FOLLOWING.simplifyM), frame, grid);
  const left = ways.filter((way) => way.leftM >= 0);
  const forkM = busiestFork(left);
  const fork = left.filter((way) => Math.abs(way.leftM - forkM) <= FOLLOWING.forkM);
  const goOnM = Math.min(forkM + FOLLOWING.forkM, lengthM - FOLLOWING.lastM);
  const straight = ways.filter((way) => way.onLineM > goOnM);
  if (fork.length < FOLLOWING.leastTrips || fork.length < FOLLOWING.timesStraight * straight.length) return arm;
  const from = Math.min(...fork.map((way) => way.leftM)) - FOLLOWING.asideM;
  const followed = alongWays(arm, line, Math.max(LEARNING.stepM, from), fork, frame);
  return lengthOf(followed.line) > forkM + FOLLOWING.lastM ? followed : arm;
}

/** Middle of the stretch in which most ways leave the line; NaN without any. */
function busiestFork(ways: Way[]): number {
  let most = 0;
  let fork = NaN;
  for (const { leftM } of ways) {
    const near = ways.filter((way) => Math.abs(way.leftM - leftM) <= FOLLOWING.forkM).length;
    if (near > most) {
      most = near;
      fork = leftM;
    }
  }
  return fork;
}

function waysOf(arm: Arm, line: Float64Array, frame: Frame, grid: PingGrid): Way[] {
  const { trips } = grid;
  const plane = frame.planes[arm.junction];
  const [ax, ay] = pointAt(line, FOLLOWING.anchorM);
  const scratch = new Uint32Array(FOLLOWING.mostPings);
  const found = pingsAround(grid, latAt(plane, ay), lonAt(plane, ax), FOLLOWING.anchorReachM, plane, scratch);
  const anchors = new Map<number, number>();
  for (let n = 0; n < found; n++) {
    const i = scratch[n];
    const x = eastM(plane, trips.lon[i]);
    const y = northM(plane, trips.lat[i]);
    if (Math.abs(x - ax) + Math.abs(y - ay) > 2 * (FOLLOWING.anchorReachM + FOLLOWING.besideM)) continue;
    const foot = projectPoint(line, x, y);
    const isNear = Math.abs(foot.at - FOLLOWING.anchorM) < FOLLOWING.anchorReachM && Math.abs(foot.offset) < FOLLOWING.besideM;
    if (!isNear || !(trips.headingDeg[i] >= 0)) continue;
    const [bx, by] = pointAt(line, foot.at + LEARNING.stepM);
    const [cx, cy] = pointAt(line, foot.at);
    const outward = arm.inbound ? trips.headingDeg[i] + 180 : trips.headingDeg[i];
    if (angleBetweenDeg(outward, bearingDeg(bx - cx, by - cy)) > FOLLOWING.alongDeg) continue;
    const trip = tripOf(trips.tripOffset, i);
    const known = anchors.get(trip);
    if (known === undefined || (arm.inbound ? i < known : i > known)) anchors.set(trip, i);
  }
  return [...anchors].map(([trip, i]) => wayOf(arm, line, frame, grid, trip, i));
}

/** Follows a trip outwards from its anchor: back in time on the way in, on in time on the way out. */
function wayOf(arm: Arm, line: Float64Array, frame: Frame, grid: PingGrid, trip: number, anchor: number): Way {
  const { trips } = grid;
  const plane = frame.planes[arm.junction];
  const step = arm.inbound ? -1 : 1;
  const end = arm.inbound ? trips.tripOffset[trip] - 1 : trips.tripOffset[trip + 1];
  const way: Way = { at: [], x: [], y: [], onLineM: 0, leftM: NaN };
  const lastM = lengthOf(line) - FOLLOWING.lastM;
  for (let i = anchor; i !== end; i += step) {
    const x = eastM(plane, trips.lon[i]);
    const y = northM(plane, trips.lat[i]);
    const n = way.at.length;
    const movedM = n > 0 ? Math.hypot(x - way.x[n - 1], y - way.y[n - 1]) : 0;
    if (n > 0 && movedM < FOLLOWING.leastStepM) continue;
    if (movedM > FOLLOWING.mostStepM) break;
    const foot = projectPoint(line, x, y);
    const isAside = Math.abs(foot.offset) > FOLLOWING.asideM;
    const at = n === 0 ? foot.at : way.at[n - 1] + movedM;
    if (!isAside && Number.isNaN(way.leftM)) way.onLineM = foot.at;
    if (way.onLineM > lastM) break;
    if (isAside && Number.isNaN(way.leftM)) way.leftM = way.onLineM;
    way.at.push(at);
    way.x.push(x);
    way.y.push(y);
    if (at > LEARNING.traceMostM) break;
  }
  return way;
}

function tripOf(tripOffset: Uint32Array, i: number): number {
  let low = 0;
  let high = tripOffset.length - 2;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (tripOffset[middle] <= i) low = middle;
    else high = middle - 1;
  }
  return low;
}

/** The arm up to the fork, then the middle of the ways, to the next junction or to where fewer than half of them are known. */
function alongWays(arm: Arm, line: Float64Array, from: number, ways: Way[], frame: Frame): Arm {
  const out = [...slice(line, 0, from)];
  const least = Math.max(FOLLOWING.leastTrips, ways.length / 2);
  let meets = -1;
  for (let at = from + LEARNING.stepM; at <= LEARNING.traceMostM && meets < 0; at += LEARNING.stepM) {
    const places = ways.flatMap((way) => placeAt(way, at));
    if (places.length < least) break;
    const x = medianOf(places.map((place) => place[0]));
    const y = medianOf(places.map((place) => place[1]));
    const met = frame.near[arm.junction].find((other) => Math.hypot(other.x - x, other.y - y) < LEARNING.boxM + LEARNING.stepM / 2);
    if (met) meets = met.junction;
    else out.push(x, y);
  }
  return { ...arm, line: out, meets };
}

function placeAt({ at, x, y }: Way, wanted: number): [number, number][] {
  const n = at.findIndex((value) => value >= wanted);
  if (n < 1) return [];
  const share = (wanted - at[n - 1]) / (at[n] - at[n - 1]);
  return [[x[n - 1] + share * (x[n] - x[n - 1]), y[n - 1] + share * (y[n] - y[n - 1])]];
}

function medianOf(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return (sorted[(sorted.length - 1) >> 1] + sorted[sorted.length >> 1]) / 2;
}
