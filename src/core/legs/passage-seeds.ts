import { bearingDeg } from "@/core/geometry/angles";
import { eastM, northM, type Plane } from "@/core/geometry/plane";
import type { ClaimIndex } from "@/core/index/junction-index";
import type { Frame } from "@/core/legs/frame";
import type { Trips } from "@/core/pings/trips";

/** Settings of seeds from passages, for sparse pings. Metres and degrees. */
export const PASSAGES = Object.freeze({
  /** Farthest ping before or after a junction that tells a direction. */
  reachM: 320,
  innerM: 22,
  /** A moving ping's heading, or a standing one's way here, must point along the ray this well. */
  headingDeg: 22,
  standingDeg: 32,
  /** A step this long tells where a standing vehicle came from or went to. */
  wayM: 25,
  /** The ping beyond the junction may lie this far back. */
  backM: 15,
  fastestMs: 30,
  movingMs: 2.5,
  /** Another junction this near to the ray lies in between. */
  besideM: 25,
  standingWeight: 0.6,
  /** Weight of a moving ping behind another junction: it may have turned there. */
  behindWeight: 0.35,
});

/** Called for each direction: role is inbound or outbound, bearing that of travel. */
export type SeedSink = (junction: number, inbound: boolean, bearing: number, weight: number, trip: number) => void;

const COS_HEADING = Math.cos((PASSAGES.headingDeg * Math.PI) / 180);
const COS_STANDING = Math.cos((PASSAGES.standingDeg * Math.PI) / 180);

/**
 * With pings 15 to 30 s apart few fall near a junction. The last ping before a junction and the first after it still lie
 * on its legs: their rays to the junction tell directions. `reach` is claimed by junctions with PASSAGES.reachM.
 */
export function collectPassages(trips: Trips, frame: Frame, reach: ClaimIndex, sink: SeedSink): void {
  for (let k = 0; k < trips.count; k++) {
    const from = trips.tripOffset[k];
    const to = trips.tripOffset[k + 1];
    for (let i = from; i + 1 < to; i++) {
      const slot = reach.find(trips.lat[i], trips.lon[i]);
      if (slot >= 0) {
        for (let n = reach.offsets[slot]; n < reach.offsets[slot + 1]; n++) look(trips, frame, reach.owners[n], k, i, i + 1, from, to, true, sink);
      }
      const next = reach.find(trips.lat[i + 1], trips.lon[i + 1]);
      if (next < 0) continue;
      for (let n = reach.offsets[next]; n < reach.offsets[next + 1]; n++) look(trips, frame, reach.owners[n], k, i + 1, i, from, to, false, sink);
    }
  }
}

/** One ping `i` beside junction `j`, with its neighbour `other` on the far side of it. */
function look(
  trips: Trips, frame: Frame, j: number, trip: number, i: number, other: number, from: number, to: number,
  inbound: boolean, sink: SeedSink,
): void {
  const plane = frame.planes[j];
  const x = eastM(plane, trips.lon[i]);
  const y = northM(plane, trips.lat[i]);
  const r = Math.hypot(x, y);
  if (r < PASSAGES.innerM || r > PASSAGES.reachM) return;
  const ox = eastM(plane, trips.lon[other]);
  const oy = northM(plane, trips.lat[other]);
  // From the ping towards the junction; the other ping must lie beyond it.
  const ux = -x / r;
  const uy = -y / r;
  const seconds = Math.abs(trips.tMs[other] - trips.tMs[i]) / 1000;
  const isBeyond = ox * ux + oy * uy >= -PASSAGES.backM;
  if (!isBeyond || (r + Math.hypot(ox, oy)) / seconds > PASSAGES.fastestMs) return;
  const sign = inbound ? 1 : -1;
  const isMoving = trips.speedMs[i] >= PASSAGES.movingMs;
  const cos = isMoving ? sign * alignment(trips.headingDeg[i], ux, uy) : wayAlignment(trips, plane, i, inbound ? from : to - 1, inbound ? -1 : 1, ux, uy);
  if (!(cos >= (isMoving ? COS_HEADING : COS_STANDING))) return;
  const isBehind = isBeside(frame, j, x, y, r);
  if (isBehind && !isMoving) return;
  const weight = isBehind ? PASSAGES.behindWeight : isMoving ? 1 : PASSAGES.standingWeight;
  sink(j, inbound, bearingDeg(sign * ux, sign * uy), weight, trip);
}

function alignment(headingDeg: number, ux: number, uy: number): number {
  const h = (headingDeg * Math.PI) / 180;
  return Math.sin(h) * ux + Math.cos(h) * uy;
}

/** How well a standing vehicle's way to (or from) its place lies along the ray; NaN where it never moved. */
function wayAlignment(trips: Trips, plane: Plane, i: number, end: number, step: number, ux: number, uy: number): number {
  for (let k = i + step; step < 0 ? k >= end : k <= end; k += step) {
    const dx = (trips.lon[i] - trips.lon[k]) * plane.metresPerLon;
    const dy = (trips.lat[i] - trips.lat[k]) * plane.metresPerLat;
    const length = Math.hypot(dx, dy);
    if (length >= PASSAGES.wayM) return (dx * ux + dy * uy) / length;
  }
  return NaN;
}

/** Whether another junction lies beside the ray between the ping and the junction. */
function isBeside(frame: Frame, j: number, x: number, y: number, r: number): boolean {
  for (const near of frame.near[j]) {
    const along = (near.x * x + near.y * y) / r;
    const side = Math.abs(near.x * y - near.y * x) / r;
    if (along > PASSAGES.innerM && along < r + PASSAGES.innerM && side < PASSAGES.besideM) return true;
  }
  return false;
}
