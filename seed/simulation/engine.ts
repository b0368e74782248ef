import { chooseLane, enter, finish, headOf, isEmpty, roomS } from "./moves";
import { serve } from "./serve";
import { createTraffic, routeOf, SLOT_S, turnAfter, type SimulationInput, type SimulationResult, type Traffic } from "./traffic";

/** Vehicles about to enter may queue for so long in front of the lane; beyond, they try again later. */
const ENTRY_QUEUE_S = 20;
/** Whoever sees no way into a full street for so long drives round it. */
const DETOUR_S = 35;
/** Whoever is shut in for so long gives up and parks: keeps a standstill from locking the city. */
const GIVE_UP_S = 300;
const SWEEP_SLOTS = 20;

/**
 * Newell's car-following in its exact event form: each lane is first in, first out; a vehicle leaves
 * it no sooner than free flow, its leader, the signal and the room downstream allow. Cost: a few
 * steps for each vehicle and stretch of lane, none for time in which nothing happens.
 */
export function simulate(input: SimulationInput): SimulationResult {
  const traffic = createTraffic(input);
  const { trips, calendar, result } = traffic;
  const slots = Math.ceil(input.endS / SLOT_S);
  let waiting: number[] = [];
  let nextTrip = 0;
  for (let slot = 0; slot < slots; slot++) {
    const slotStartS = slot * SLOT_S;
    while (nextTrip < trips.length && trips.departS[nextTrip] < slotStartS + SLOT_S) {
      if (!depart(traffic, nextTrip, trips.departS[nextTrip])) waiting.push(nextTrip);
      nextTrip++;
    }
    if (slot % SWEEP_SLOTS === 0) {
      waiting = waiting.filter((trip) => !depart(traffic, trip, slotStartS));
      freeTheShutIn(traffic, slotStartS);
    }
    for (let lane = calendar.take(slot); lane >= 0; lane = calendar.take(slot)) serve(traffic, lane, slotStartS);
  }
  result.keptOut = waiting.length;
  return result;
}

function depart(traffic: Traffic, trip: number, atS: number): boolean {
  const { map, lanes } = traffic;
  const route = routeOf(traffic, trip);
  const candidates = route.startsAtAccess ? map.accessOf[route.firstLink] : map.firstOf[route.firstLink];
  const lane = chooseLane(traffic, candidates, turnAfter(traffic, route, 0));
  const room = roomS(traffic, lane);
  if (room > atS + ENTRY_QUEUE_S) return false;
  enter(traffic, lane, trip, Math.max(atS, room));
  traffic.result.started++;
  traffic.linkEntryS[trip] = Math.max(atS, room);
  traffic.linkFreeS[trip] = traffic.freeS[route.firstLink] - map.lanes[lane].startM / lanes.speedMs[lane];
  return true;
}

function freeTheShutIn(traffic: Traffic, nowS: number): void {
  const { lanes, calendar, map } = traffic;
  for (let lane = 0; lane < map.lanes.length; lane++) {
    const heldS = nowS - lanes.blockedSinceS[lane];
    if (!(heldS > DETOUR_S) || isEmpty(traffic, lane)) continue;
    const trip = headOf(traffic, lane);
    if (lanes.next[lane] < 0 && drivesRound(traffic, lane, trip)) {
      lanes.blockedSinceS[lane] = NaN;
      calendar.schedule(lane, nowS);
    } else if (heldS > GIVE_UP_S) {
      finish(traffic, lane, trip, nowS);
      traffic.result.gaveUp++;
      if (!isEmpty(traffic, lane)) calendar.schedule(lane, nowS);
    }
  }
}

/** Gives the head of a lane another movement from there, into a street with room. */
function drivesRound(traffic: Traffic, lane: number, trip: number): boolean {
  const { city, lanes, hop, map, movementTo } = traffic;
  const route = routeOf(traffic, trip);
  if (hop[trip] >= route.movements.length) return false;
  for (const movement of city.movementsOf[lanes.link[lane]]) {
    if (movement === route.movements[hop[trip]] || (traffic.turnBit[movement] & lanes.turns[lane]) === 0) continue;
    const other = traffic.detours.via(route, hop[trip], movement);
    if (!other) continue;
    const target = chooseLane(traffic, map.firstOf[movementTo[movement]], turnAfter(traffic, other, hop[trip] + 1));
    if (roomS(traffic, target) === Infinity) continue;
    traffic.changed.set(trip, other);
    traffic.result.detours++;
    return true;
  }
  return false;
}
