import type { City, CityLink, TurnName } from "../network/types";
import { LANE_WIDTH_M } from "../network/street-standards";

/** Newell (2002): a follower repeats its leader's path one jam spacing back and one reaction time later. */
export const JAM_SPACING_M = 7;
export const REACTION_S = 1.5;

export const TURN_BIT: Record<TurnName, number> = { left: 1, through: 2, right: 4 };
const ANY_TURN = 7;

/** A lane of one stretch of a link. Lanes never exchange vehicles within a stretch. */
export interface Lane {
  index: number;
  link: number;
  /** Where the stretch begins and ends along the link. */
  startM: number;
  endM: number;
  /** Right of the middle of the carriageway. */
  lateralM: number;
  /** Places for standing vehicles. */
  places: number;
  /** Turns that the lane leads to, as bits of TURN_BIT. */
  turns: number;
  /** The lane straight on in the next stretch, and the bay that opens on its left; -1 at the end of the link. */
  next: number;
  nextBay: number;
}

export interface LaneMap {
  lanes: Lane[];
  /** Lanes of the first stretch of each link, left to right. */
  firstOf: number[][];
  /** Lanes in which vehicles from a drive half-way along the link start; empty where there is no drive. */
  accessOf: number[][];
  /** Lanes that end at the stop line, bay first. */
  lastOf: number[][];
}

export function buildLanes(city: City): LaneMap {
  const map: LaneMap = { lanes: [], firstOf: [], accessOf: [], lastOf: [] };
  for (const link of city.links) addLink(map, link, turnsOf(city, link));
  return map;
}

function turnsOf(city: City, link: CityLink): number {
  return city.movementsOf[link.index].reduce((bits, movement) => bits | TURN_BIT[city.movements[movement].turn], 0);
}

function addLink(map: LaneMap, link: CityLink, turns: number): void {
  const hasBay = link.bayM > 0 && (turns & TURN_BIT.left) !== 0 && turns !== TURN_BIT.left;
  const bayStartM = link.lengthM - (hasBay ? link.bayM : 0);
  const cuts = [0, ...(link.hasAccess ? [bayStartM * 0.5] : []), bayStartM, ...(hasBay ? [link.lengthM] : [])];
  const main = laneTurns(turns, link.lanes, hasBay);
  let before: number[] = [];
  for (let stretch = 1; stretch < cuts.length; stretch++) {
    const isLast = stretch === cuts.length - 1;
    const own: number[] = [];
    for (let i = 0; i < link.lanes; i++) {
      const reaches = isLast || !hasBay || i > 0 ? main[i] : main[i] | TURN_BIT.left;
      const lane = addLane(map, link, cuts[stretch - 1], cuts[stretch], i, reaches);
      own.push(lane);
      if (before.length > 0) map.lanes[before[i]].next = lane;
    }
    if (isLast && hasBay) {
      const bay = addLane(map, link, cuts[stretch - 1], cuts[stretch], -1, TURN_BIT.left);
      map.lanes[before[0]].nextBay = bay;
      own.unshift(bay);
    }
    if (stretch === 1) map.firstOf[link.index] = own;
    if (stretch === 2 && link.hasAccess) map.accessOf[link.index] = own.slice(isLast && hasBay ? 1 : 0);
    if (isLast) map.lastOf[link.index] = own;
    before = own;
  }
  map.accessOf[link.index] ??= [];
}

function addLane(map: LaneMap, link: CityLink, startM: number, endM: number, place: number, turns: number): number {
  const index = map.lanes.length;
  const lateralM = (place - (link.lanes - 1) / 2) * LANE_WIDTH_M;
  const places = Math.max(1, Math.round((endM - startM) / JAM_SPACING_M));
  map.lanes.push({ index, link: link.index, startM, endM, lateralM, places, turns, next: -1, nextBay: -1 });
  return index;
}

/** Which turns each through lane serves, left to right. Gates (no turns) take any. */
function laneTurns(turns: number, lanes: number, hasBay: boolean): number[] {
  if (turns === 0) return new Array<number>(lanes).fill(ANY_TURN);
  const rest = hasBay ? turns & ~TURN_BIT.left : turns;
  if (lanes === 1) return [rest];
  const through = rest & TURN_BIT.through;
  const left = (rest & TURN_BIT.left) | through || TURN_BIT.right & rest;
  const right = (rest & TURN_BIT.right) | through || TURN_BIT.left & rest;
  return [left, right];
}
