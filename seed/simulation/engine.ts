import type { City } from "../network/types";
import type { Route } from "../demand/routes";
import type { SignalPlan } from "../signals/plan";
import { createCalendar } from "./calendar";
import { createDetours } from "./detours";
import { buildLanes, REACTION_S, TURN_BIT, type LaneMap } from "./lanes";
import { createSignalClock } from "./signals";
import { createLaneState, RING, RING_MASK, type LaneState, type MovementTruth, type Trips } from "./state";

export const SLOT_S = 0.5;
const SATURATION_S: Record<"left" | "through" | "right", number> = { left: 2.1, through: 2, right: 2.25 };
const START_LOSS_S = 0.8;
/** Critical gap of a left turn against the opposing stream. */
const GAP_BEFORE_S = 3.6;
const GAP_AFTER_S = 1.2;
/** Whoever is shut in for so long gives up and parks: keeps a standstill from locking the city. */
const GIVE_UP_S = 300;
/** Whoever sees no way into a full street for so long drives round it. */
const DETOUR_S = 60;
const SWEEP_SLOTS = 20;
/** Vehicles about to enter may queue for so long in front of the lane; beyond, they try again later. */
const ENTRY_QUEUE_S = 20;

export interface Passage {
  trip: number;
  lane: number;
  /** The vehicle's number in the lane. */
  place: number;
  exitS: number;
  /** Movement that follows; -1 where the next stretch of the same link or the end follows. */
  movement: number;
}

export interface SimulationInput {
  city: City;
  map?: LaneMap;
  routes: Route[];
  plan: SignalPlan;
  trips: Trips;
  endS: number;
  truth?: MovementTruth;
  /** Called when a watched vehicle leaves a lane. */
  onPassage?: (state: LaneState, passage: Passage) => void;
  onEnd?: (trip: number) => void;
  isWatched: (trip: number) => boolean;
}

export interface SimulationResult {
  started: number;
  finished: number;
  detours: number;
  gaveUp: number;
  /** Trips that never found room to enter. */
  keptOut: number;
  state: LaneState;
}

/**
 * Newell's car-following in its exact event form: each lane is first in, first out; a vehicle leaves
 * it no sooner than free flow, its leader, the signal and the room downstream allow (a place frees up
 * one reaction time per place after the vehicle that used it has gone: the backward wave).
 */
export function simulate(input: SimulationInput): SimulationResult {
  const { city, routes, plan, trips, truth, onPassage, onEnd, isWatched } = input;
  const map = input.map ?? buildLanes(city);
  const lanes = createLaneState(city, map);
  const clock = createSignalClock(city, plan);
  const slots = Math.ceil(input.endS / SLOT_S);
  const calendar = createCalendar(map.lanes.length, slots, SLOT_S);
  const waiterHead = new Int32Array(map.lanes.length).fill(-1);
  const waiterNext = new Int32Array(map.lanes.length).fill(-1);
  const isWaiter = new Uint8Array(map.lanes.length);
  const hop = new Int32Array(trips.length);
  const linkEntryS = new Float64Array(trips.length);
  const linkFreeS = new Float64Array(trips.length);
  const freeS = Float64Array.from(city.links, (link) => link.lengthM / link.speedMs);
  const movementTo = Int32Array.from(city.movements, (movement) => movement.to);
  const turnBit = Uint8Array.from(city.movements, (movement) => TURN_BIT[movement.turn]);
  const crossS = Float64Array.from(city.movements, (movement) => movement.lengthM / movement.speedMs);
  const saturationS = Float64Array.from(city.movements, (movement) => SATURATION_S[movement.turn]);
  const opposing = opposingLanes(city, plan, map);
  const detours = createDetours(city);
  const changed = new Map<number, Route>();
  const routeOf = (trip: number): Route => changed.get(trip) ?? routes[trips.route[trip]];
  const result: SimulationResult = { started: 0, finished: 0, detours: 0, gaveUp: 0, keptOut: 0, state: lanes };
  let waiting: number[] = [];
  let nextTrip = 0;

  /** The lane among the candidates with the fewest vehicles that leads to the turn; -1 where none has room. */
  function chooseLane(candidates: number[], turn: number): number {
    let best = -1;
    let fewest = 1 << 30;
    for (const lane of candidates) {
      if ((lanes.turns[lane] & turn) === 0) continue;
      const inside = lanes.entered[lane] - lanes.left[lane];
      if (inside < fewest) [best, fewest] = [lane, inside];
    }
    return best;
  }

  function turnAfter(route: Route, index: number): number {
    return index < route.movements.length ? turnBit[route.movements[index]] : 7;
  }

  /** Earliest moment at which the lane can take one more vehicle; Infinity while it is full. */
  function roomS(lane: number): number {
    const before = lanes.entered[lane] - lanes.places[lane];
    const afterLastS = lanes.lastEntryS[lane] + lanes.headwayS[lane];
    if (before < 0) return afterLastS;
    if (before >= lanes.left[lane]) return Infinity;
    return Math.max(afterLastS, lanes.exitS[lane * RING + (before & RING_MASK)] + lanes.places[lane] * REACTION_S);
  }

  function enter(lane: number, trip: number, atS: number): void {
    const place = lanes.entered[lane]++;
    lanes.entryS[lane * RING + (place & RING_MASK)] = atS;
    lanes.vehicle[lane * RING + (place & RING_MASK)] = trip;
    lanes.lastEntryS[lane] = atS;
    if (place === lanes.left[lane]) calendar.schedule(lane, readyS(lane));
  }

  function readyS(lane: number): number {
    const place = lanes.left[lane];
    const at = lane * RING + (place & RING_MASK);
    const trip = lanes.vehicle[at];
    const freeS = lanes.entryS[at] + lanes.lengthM[lane] / (lanes.speedMs[lane] * trips.pace[trip]);
    return Math.max(freeS, lanes.lastExitS[lane] + lanes.headwayS[lane]);
  }

  function leave(lane: number, trip: number, atS: number, movement: number): void {
    const place = lanes.left[lane]++;
    lanes.exitS[lane * RING + (place & RING_MASK)] = atS;
    lanes.lastExitS[lane] = atS;
    lanes.blockedSinceS[lane] = NaN;
    if (onPassage && isWatched(trip)) onPassage(lanes, { trip, lane, place, exitS: atS, movement });
    for (let waiter = waiterHead[lane]; waiter >= 0; ) {
      const next = waiterNext[waiter];
      isWaiter[waiter] = 0;
      calendar.schedule(waiter, atS);
      waiter = next;
    }
    waiterHead[lane] = -1;
  }

  function holdFor(lane: number, target: number, nowS: number): void {
    if (Number.isNaN(lanes.blockedSinceS[lane])) lanes.blockedSinceS[lane] = nowS;
    if (isWaiter[lane]) return;
    isWaiter[lane] = 1;
    waiterNext[lane] = waiterHead[target];
    waiterHead[target] = lane;
  }

  function finish(lane: number, trip: number, atS: number): void {
    leave(lane, trip, atS, -1);
    result.finished++;
    if (onEnd) onEnd(trip);
  }

  /** Turn of the lane's first vehicle: two facing lefts pass each other. */
  function nextTurn(lane: number): number {
    const trip = lanes.vehicle[lane * RING + (lanes.left[lane] & RING_MASK)];
    return turnAfter(routeOf(trip), hop[trip]);
  }

  function gapIsOpen(movement: number, atS: number): boolean {
    for (const lane of opposing[movement]) {
      if (lanes.lastExitS[lane] > atS - GAP_AFTER_S) return false;
      if (lanes.entered[lane] === lanes.left[lane] || !Number.isNaN(lanes.blockedSinceS[lane])) continue;
      if (nextTurn(lane) !== TURN_BIT.left && readyS(lane) < atS + GAP_BEFORE_S) return false;
    }
    return true;
  }

  /** Lets the lane's first vehicles go while they can within this slot. */
  function serve(lane: number, slotStartS: number): void {
    const slotEndS = slotStartS + SLOT_S;
    while (lanes.entered[lane] > lanes.left[lane]) {
      const at = lane * RING + (lanes.left[lane] & RING_MASK);
      const trip = lanes.vehicle[at];
      const route = routeOf(trip);
      let atS = Math.max(readyS(lane), slotStartS);
      if (atS >= slotEndS) return calendar.schedule(lane, atS);
      const isLastLink = hop[trip] >= route.movements.length;
      if (lanes.next[lane] >= 0) {
        if (isLastLink && route.endsAtAccess) {
          finish(lane, trip, atS);
          continue;
        }
        const isBay = lanes.nextBay[lane] >= 0 && !isLastLink && turnBit[route.movements[hop[trip]]] === TURN_BIT.left;
        const target = isBay ? lanes.nextBay[lane] : lanes.next[lane];
        const room = roomS(target);
        if (room === Infinity) return holdFor(lane, target, slotStartS);
        if (room >= slotEndS) return calendar.schedule(lane, room);
        atS = Math.max(atS, room);
        enter(target, trip, atS);
        leave(lane, trip, atS, -1);
        continue;
      }
      if (isLastLink) {
        finish(lane, trip, atS);
        continue;
      }
      const movement = route.movements[hop[trip]];
      atS = Math.max(atS, lanes.lastExitS[lane] + saturationS[movement] + trips.slackS[trip]);
      const greenS = clock.nextGreenS(movement, atS);
      if (greenS > atS) atS = greenS + START_LOSS_S;
      if (atS >= slotEndS) return calendar.schedule(lane, atS);
      if (clock.isPermitted(movement) && !clock.isClearing(movement, atS) && !gapIsOpen(movement, atS)) return calendar.schedule(lane, slotEndS + SLOT_S);
      const link = movementTo[movement];
      const target = chooseLane(map.firstOf[link], turnAfter(route, hop[trip] + 1));
      const room = roomS(target) - crossS[movement];
      if (room === Infinity) return holdFor(lane, target, slotStartS);
      if (room >= slotEndS) return calendar.schedule(lane, room);
      atS = Math.max(atS, room);
      hop[trip]++;
      if (truth) recordTruth(truth, lanes, lane, movement, atS, linkEntryS[trip], linkFreeS[trip] / trips.pace[trip]);
      linkEntryS[trip] = atS + crossS[movement];
      linkFreeS[trip] = freeS[link];
      enter(target, trip, atS + crossS[movement]);
      leave(lane, trip, atS, movement);
    }
  }

  function depart(trip: number, atS: number): boolean {
    const route = routeOf(trip);
    const candidates = route.startsAtAccess ? map.accessOf[route.firstLink] : map.firstOf[route.firstLink];
    const lane = chooseLane(candidates, turnAfter(route, 0));
    const room = roomS(lane);
    if (room > atS + ENTRY_QUEUE_S) return false;
    enter(lane, trip, Math.max(atS, room));
    linkEntryS[trip] = Math.max(atS, room);
    linkFreeS[trip] = freeS[route.firstLink] - map.lanes[lane].startM / lanes.speedMs[lane];
    result.started++;
    return true;
  }

  /** Gives the first vehicle of a lane another movement from there, into a street with room. */
  function drivesRound(lane: number, trip: number): boolean {
    const route = routeOf(trip);
    if (hop[trip] >= route.movements.length) return false;
    for (const movement of city.movementsOf[lanes.link[lane]]) {
      if (movement === route.movements[hop[trip]] || (turnBit[movement] & lanes.turns[lane]) === 0) continue;
      const other = detours.via(route, hop[trip], movement);
      if (!other) continue;
      const target = chooseLane(map.firstOf[movementTo[movement]], turnAfter(other, hop[trip] + 1));
      if (roomS(target) === Infinity) continue;
      changed.set(trip, other);
      result.detours++;
      return true;
    }
    return false;
  }

  function sweep(nowS: number): void {
    waiting = waiting.filter((trip) => !depart(trip, nowS));
    for (let lane = 0; lane < map.lanes.length; lane++) {
      const since = lanes.blockedSinceS[lane];
      if (Number.isNaN(since)) continue;
      if (lanes.next[lane] < 0 && nowS - since > DETOUR_S) {
        const trip = lanes.vehicle[lane * RING + (lanes.left[lane] & RING_MASK)];
        if (drivesRound(lane, trip)) {
          lanes.blockedSinceS[lane] = NaN;
          calendar.schedule(lane, nowS);
          continue;
        }
      }
      if (nowS - since > GIVE_UP_S && lanes.entered[lane] > lanes.left[lane]) {
        const trip = lanes.vehicle[lane * RING + (lanes.left[lane] & RING_MASK)];
        finish(lane, trip, nowS);
        result.gaveUp++;
        if (lanes.entered[lane] > lanes.left[lane] && !calendar.isWaiting(lane)) calendar.schedule(lane, nowS);
      }
    }
  }

  for (let slot = 0; slot < slots; slot++) {
    const slotStartS = slot * SLOT_S;
    while (nextTrip < trips.length && trips.departS[nextTrip] < slotStartS + SLOT_S) {
      if (!depart(nextTrip, trips.departS[nextTrip])) waiting.push(nextTrip);
      nextTrip++;
    }
    if (slot % SWEEP_SLOTS === 0) sweep(slotStartS);
    for (let lane = calendar.take(slot); lane >= 0; lane = calendar.take(slot)) serve(lane, slotStartS);
  }
  result.keptOut = waiting.length;
  return result;
}

/** Lanes whose through and right vehicles a permitted left must let pass. */
function opposingLanes(city: City, plan: SignalPlan, map: LaneMap): number[][] {
  const lanes: number[][] = city.movements.map(() => []);
  for (const timing of plan.timings) {
    for (const stage of timing.stages) {
      for (const left of stage.permitted) {
        const own = city.movements[left].from;
        const links = new Set(stage.protected.map((m) => city.movements[m].from).filter((link) => link !== own));
        for (const link of links) lanes[left].push(...map.lastOf[link].filter((lane) => (map.lanes[lane].turns & (TURN_BIT.through | TURN_BIT.right)) !== 0));
      }
    }
  }
  return lanes;
}

function recordTruth(truth: MovementTruth, lanes: LaneState, lane: number, movement: number, exitS: number, entryS: number, freeS: number): void {
  const bin = Math.floor((exitS - truth.startS) / truth.binS);
  if (bin < 0 || bin >= truth.bins) return;
  truth.vehicles[movement * truth.bins + bin]++;
  truth.delayS[movement * truth.bins + bin] += exitS - entryS - freeS;
  const blockedSinceS = lanes.blockedSinceS[lane];
  if (blockedSinceS === blockedSinceS) truth.blockedS[lanes.link[lane] * truth.bins + bin] += exitS - blockedSinceS;
}
