import { REACTION_S } from "./lanes";
import { RING, RING_MASK } from "./state";
import type { Traffic } from "./traffic";

/** The vehicle at the head of a lane; only for a lane that is not empty. */
export function headOf(traffic: Traffic, lane: number): number {
  const { lanes } = traffic;
  return lanes.vehicle[lane * RING + (lanes.left[lane] & RING_MASK)];
}

export function isEmpty(traffic: Traffic, lane: number): boolean {
  return traffic.lanes.entered[lane] === traffic.lanes.left[lane];
}

/** The lane among the candidates with the fewest vehicles that leads to the turn. */
export function chooseLane(traffic: Traffic, candidates: number[], turn: number): number {
  const { lanes } = traffic;
  let best = -1;
  let fewest = 1 << 30;
  for (const lane of candidates) {
    if ((lanes.turns[lane] & turn) === 0) continue;
    const inside = lanes.entered[lane] - lanes.left[lane];
    if (inside < fewest) {
      best = lane;
      fewest = inside;
    }
  }
  return best;
}

/**
 * Earliest moment at which a lane can take one more vehicle; Infinity while it is full. A place
 * frees up at the far end one reaction time per place after the vehicle that used it has left;
 * those who entered before must have driven on, each at its own pace.
 */
export function roomS(traffic: Traffic, lane: number): number {
  const { lanes, trips } = traffic;
  const entered = lanes.entered[lane];
  const before = entered - lanes.places[lane];
  if (before >= lanes.left[lane]) return Infinity;
  const base = lane * RING;
  let atS = before < 0 ? -Infinity : lanes.exitS[base + (before & RING_MASK)] + lanes.places[lane] * REACTION_S;
  const stepS = lanes.spacingM[lane] / lanes.speedMs[lane];
  const farthest = Math.min(lanes.places[lane], entered);
  for (let k = 1; k <= farthest; k++) {
    const at = base + ((entered - k) & RING_MASK);
    const clearS = lanes.entryS[at] + k * (REACTION_S + stepS / trips.pace[lanes.vehicle[at]]);
    if (clearS > atS) atS = clearS;
    if (entered - k < lanes.left[lane] && lanes.exitS[at] + k * REACTION_S < atS) break;
  }
  return atS;
}

/** When the head of a lane reaches its end, by its own speed and behind its leader. */
export function readyS(traffic: Traffic, lane: number): number {
  const { lanes } = traffic;
  const at = lane * RING + (lanes.left[lane] & RING_MASK);
  const freeS = lanes.entryS[at] + lanes.lengthM[lane] / (lanes.speedMs[lane] * traffic.trips.pace[lanes.vehicle[at]]);
  return Math.max(freeS, lanes.lastExitS[lane] + lanes.headwayS[lane]);
}

export function enter(traffic: Traffic, lane: number, trip: number, atS: number): void {
  const { lanes } = traffic;
  const place = lanes.entered[lane]++;
  lanes.entryS[lane * RING + (place & RING_MASK)] = atS;
  lanes.vehicle[lane * RING + (place & RING_MASK)] = trip;
  if (place === lanes.left[lane]) traffic.calendar.schedule(lane, readyS(traffic, lane));
}

/** The head leaves: who waited for room looks again, who watches is told. */
export function leave(traffic: Traffic, lane: number, trip: number, atS: number, movement: number): void {
  const { lanes, waiterHead, waiterNext, isWaiter, input } = traffic;
  const place = lanes.left[lane]++;
  lanes.exitS[lane * RING + (place & RING_MASK)] = atS;
  lanes.lastExitS[lane] = atS;
  lanes.blockedSinceS[lane] = NaN;
  if (input.onPassage && input.isWatched(trip)) input.onPassage(lanes, { trip, lane, place, exitS: atS, movement });
  let waiter = waiterHead[lane];
  waiterHead[lane] = -1;
  while (waiter >= 0) {
    isWaiter[waiter] = 0;
    traffic.calendar.schedule(waiter, atS);
    waiter = waiterNext[waiter];
  }
}

/** The head of `lane` waits for room in `target`. */
export function holdFor(traffic: Traffic, lane: number, target: number, nowS: number): void {
  const { lanes, waiterHead, waiterNext, isWaiter } = traffic;
  if (Number.isNaN(lanes.blockedSinceS[lane])) lanes.blockedSinceS[lane] = nowS;
  if (isWaiter[lane]) return;
  isWaiter[lane] = 1;
  waiterNext[lane] = waiterHead[target];
  waiterHead[target] = lane;
}

export function finish(traffic: Traffic, lane: number, trip: number, atS: number): void {
  leave(traffic, lane, trip, atS, -1);
  traffic.result.finished++;
  if (traffic.input.onEnd) traffic.input.onEnd(trip);
}
