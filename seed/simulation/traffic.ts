import type { Route } from "../demand/routes";
import type { City } from "../network/types";
import type { SignalPlan } from "../signals/plan";
import { createCalendar, type Calendar } from "./calendar";
import { createDetours, type Detours } from "./detours";
import { TURN_BIT, type LaneMap } from "./lanes";
import { opposingLanes } from "./opposing";
import { createSignalClock, type SignalClock } from "./signals";
import { createLaneState, type LaneState, type MovementTruth, type Trips } from "./state";

export const SLOT_S = 0.5;

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
  map: LaneMap;
  routes: Route[];
  plan: SignalPlan;
  trips: Trips;
  endS: number;
  truth?: MovementTruth;
  /** Whose passages are reported. */
  isWatched: (trip: number) => boolean;
  onPassage?: (lanes: LaneState, passage: Passage) => void;
  onEnd?: (trip: number) => void;
}

export interface SimulationResult {
  started: number;
  finished: number;
  /** Vehicles that left a full street for another way. */
  detours: number;
  gaveUp: number;
  /** Trips that never found room to enter. */
  keptOut: number;
  lanes: LaneState;
}

/** Everything that changes or is looked up while vehicles move. */
export interface Traffic {
  input: SimulationInput;
  city: City;
  map: LaneMap;
  trips: Trips;
  lanes: LaneState;
  clock: SignalClock;
  calendar: Calendar;
  detours: Detours;
  result: SimulationResult;
  /** Next movement of each trip, as a place in its route. */
  hop: Int32Array;
  /** Routes of those who took a detour. */
  changed: Map<number, Route>;
  linkEntryS: Float64Array;
  /** Time over the rest of the link at its free speed. */
  linkFreeS: Float64Array;
  /** Lanes held up by a full lane, as linked lists by that lane. */
  waiterHead: Int32Array;
  waiterNext: Int32Array;
  isWaiter: Uint8Array;
  movementTo: Int32Array;
  turnBit: Uint8Array;
  /** Time across the junction. */
  crossS: Float64Array;
  saturationS: Float64Array;
  freeS: Float64Array;
  opposing: number[][];
}

const SATURATION_S = { left: 2.1, through: 2, right: 2.25 } as const;

export function createTraffic(input: SimulationInput): Traffic {
  const { city, map, trips, plan } = input;
  const lanes = createLaneState(city, map);
  const n = map.lanes.length;
  return {
    input, city, map, trips, lanes,
    clock: createSignalClock(city, plan),
    calendar: createCalendar(n, Math.ceil(input.endS / SLOT_S), SLOT_S),
    detours: createDetours(city),
    result: { started: 0, finished: 0, detours: 0, gaveUp: 0, keptOut: 0, lanes },
    hop: new Int32Array(trips.length),
    changed: new Map(),
    linkEntryS: new Float64Array(trips.length),
    linkFreeS: new Float64Array(trips.length),
    waiterHead: new Int32Array(n).fill(-1),
    waiterNext: new Int32Array(n).fill(-1),
    isWaiter: new Uint8Array(n),
    movementTo: Int32Array.from(city.movements, (movement) => movement.to),
    turnBit: Uint8Array.from(city.movements, (movement) => TURN_BIT[movement.turn]),
    crossS: Float64Array.from(city.movements, (movement) => movement.lengthM / movement.speedMs),
    saturationS: Float64Array.from(city.movements, (movement) => SATURATION_S[movement.turn]),
    freeS: Float64Array.from(city.links, (link) => link.lengthM / link.speedMs),
    opposing: opposingLanes(city, plan, map),
  };
}

export function routeOf(traffic: Traffic, trip: number): Route {
  return traffic.changed.get(trip) ?? traffic.input.routes[traffic.trips.route[trip]];
}

const ANY_TURN = 7;

/** Turn with which a route goes on after its first `hop` movements, as a bit; any where it ends. */
export function turnAfter(traffic: Traffic, route: Route, hop: number): number {
  return hop < route.movements.length ? traffic.turnBit[route.movements[hop]] : ANY_TURN;
}
