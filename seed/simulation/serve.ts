import { TURN_BIT } from "./lanes";
import { chooseLane, enter, finish, headOf, holdFor, isEmpty, leave, readyS, roomS } from "./moves";
import { recordTruth } from "./state";
import { routeOf, SLOT_S, turnAfter, type Traffic } from "./traffic";
import type { Route } from "../demand/routes";

const START_LOSS_S = 0.8;
/** A permitted left goes when nobody opposing is so close, or has just passed. */
const GAP_BEFORE_S = 3.6;
const GAP_AFTER_S = 1.2;

/** Lets the vehicles at the head of a lane go while they can within this slot; arranges the next look. */
export function serve(traffic: Traffic, lane: number, slotStartS: number): void {
  while (!isEmpty(traffic, lane)) {
    const trip = headOf(traffic, lane);
    const route = routeOf(traffic, trip);
    const atS = Math.max(readyS(traffic, lane), slotStartS);
    if (atS >= slotStartS + SLOT_S) return traffic.calendar.schedule(lane, atS);
    const isLastLink = traffic.hop[trip] >= route.movements.length;
    if (isLastLink && (traffic.lanes.next[lane] < 0 || route.endsAtAccess)) finish(traffic, lane, trip, atS);
    else if (traffic.lanes.next[lane] >= 0) {
      if (!moveOn(traffic, lane, trip, route, atS, slotStartS)) return;
    } else if (!cross(traffic, lane, trip, route, atS, slotStartS)) return;
  }
}

/** Into the next stretch of the same link. */
function moveOn(traffic: Traffic, lane: number, trip: number, route: Route, atS: number, slotStartS: number): boolean {
  const { lanes, calendar, hop } = traffic;
  const isBay = lanes.nextBay[lane] >= 0 && hop[trip] < route.movements.length && traffic.turnBit[route.movements[hop[trip]]] === TURN_BIT.left;
  const target = isBay ? lanes.nextBay[lane] : lanes.next[lane];
  const room = roomS(traffic, target);
  if (room === Infinity) {
    holdFor(traffic, lane, target, slotStartS);
    return false;
  }
  if (room >= slotStartS + SLOT_S) {
    calendar.schedule(lane, room);
    return false;
  }
  enter(traffic, target, trip, Math.max(atS, room));
  leave(traffic, lane, trip, Math.max(atS, room), -1);
  return true;
}

/** Over the stop line into the next link, if signal, gaps and room allow. */
function cross(traffic: Traffic, lane: number, trip: number, route: Route, arriveS: number, slotStartS: number): boolean {
  const { lanes, calendar, clock, hop, trips } = traffic;
  const slotEndS = slotStartS + SLOT_S;
  const movement = route.movements[hop[trip]];
  let atS = Math.max(arriveS, lanes.lastExitS[lane] + traffic.saturationS[movement] + trips.slackS[trip]);
  const greenS = clock.nextGreenS(movement, atS);
  if (greenS > atS) atS = greenS + START_LOSS_S;
  if (atS >= slotEndS) {
    calendar.schedule(lane, atS);
    return false;
  }
  if (clock.isPermitted(movement) && !clock.isClearing(movement, atS) && !isGapOpen(traffic, movement, atS)) {
    calendar.schedule(lane, slotEndS + SLOT_S);
    return false;
  }
  const link = traffic.movementTo[movement];
  const target = chooseLane(traffic, traffic.map.firstOf[link], turnAfter(traffic, route, hop[trip] + 1));
  const room = roomS(traffic, target) - traffic.crossS[movement];
  if (room === Infinity) {
    holdFor(traffic, lane, target, slotStartS);
    return false;
  }
  const isAfterGreen = room > atS && clock.nextGreenS(movement, room) > room;
  if (isAfterGreen || (room > atS && room >= slotEndS)) {
    // Room that comes after the green is no room: the driver counts the wait from now.
    if (isAfterGreen && Number.isNaN(lanes.blockedSinceS[lane])) lanes.blockedSinceS[lane] = slotStartS;
    calendar.schedule(lane, Math.max(room, slotEndS));
    return false;
  }
  atS = Math.max(atS, room);
  hop[trip]++;
  if (traffic.input.truth) {
    recordTruth(traffic.input.truth, lanes, lane, movement, atS, traffic.linkEntryS[trip], traffic.linkFreeS[trip] / trips.pace[trip]);
  }
  traffic.linkEntryS[trip] = atS + traffic.crossS[movement];
  traffic.linkFreeS[trip] = traffic.freeS[link];
  enter(traffic, target, trip, atS + traffic.crossS[movement]);
  leave(traffic, lane, trip, atS, movement);
  return true;
}

function isGapOpen(traffic: Traffic, movement: number, atS: number): boolean {
  const { lanes } = traffic;
  for (const lane of traffic.opposing[movement]) {
    if (lanes.lastExitS[lane] > atS - GAP_AFTER_S) return false;
    if (isEmpty(traffic, lane) || !Number.isNaN(lanes.blockedSinceS[lane])) continue;
    const trip = headOf(traffic, lane);
    // Two facing lefts pass each other.
    const isLeft = turnAfter(traffic, routeOf(traffic, trip), traffic.hop[trip]) === TURN_BIT.left;
    if (!isLeft && readyS(traffic, lane) < atS + GAP_BEFORE_S) return false;
  }
  return true;
}
