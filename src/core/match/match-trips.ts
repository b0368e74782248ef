import { eastM, northM, planeAt } from "@/core/geometry/plane";
import { createCandidates, findCandidates, type Candidates } from "@/core/match/candidates";
import type { StreetGraph } from "@/core/match/graph";
import { cellAt } from "@/core/match/link-grid";
import { DEAREST_STEP, MATCHING } from "@/core/match/matching";
import type { Trips } from "@/core/pings/trips";

/**
 * A stretch of a trip that stayed on the network: the links passed, in order, and the pings with the place of each
 * in the list of links and their position on that link.
 */
export interface Chain {
  trip: number;
  links: number[];
  pings: number[];
  /** Index into `links` for each ping. */
  step: number[];
  position: number[];
}

/**
 * Most likely path of every trip by a hidden Markov model: states are places on links and one state off the network;
 * Viterbi's algorithm (after Newson and Krumm, Hidden Markov map matching through noise and sparseness, 2009).
 * Calls `visit` for each stretch on the network. O(pings x candidates squared).
 */
export function matchTrips(trips: Trips, graph: StreetGraph, visit: (chain: Chain) => void): void {
  const work = createWork(trips);
  for (let k = 0; k < trips.count; k++) {
    const states = thinTrip(trips, k, work);
    if (states < 2) continue;
    if (!placePings(trips, graph, work, states)) continue;
    decode(trips, graph, work, states);
    collectChains(trips, graph, work, states, k, visit);
  }
}

const WIDTH: number = MATCHING.candidates + 1;
const OFF: number = MATCHING.candidates;

interface Work {
  ping: Uint32Array;
  cell: Int32Array;
  x: Float64Array;
  y: Float64Array;
  near: Candidates;
  cost: Float64Array;
  back: Int8Array;
  /** 1 where the step to a state is a way over the network, 0 where it led over unknown streets. */
  isWay: Uint8Array;
  chosen: Int8Array;
}

function createWork(trips: Trips): Work {
  let longest = 0;
  for (let k = 0; k < trips.count; k++) longest = Math.max(longest, trips.tripOffset[k + 1] - trips.tripOffset[k]);
  return {
    ping: new Uint32Array(longest),
    cell: new Int32Array(longest),
    x: new Float64Array(longest),
    y: new Float64Array(longest),
    near: createCandidates(longest),
    cost: new Float64Array(longest * WIDTH),
    back: new Int8Array(longest * WIDTH),
    isWay: new Uint8Array(longest * WIDTH),
    chosen: new Int8Array(longest),
  };
}

/** Keeps pings at least MATCHING.thinS apart; the first and the last always stay. */
function thinTrip(trips: Trips, k: number, work: Work): number {
  const { tMs, lat, lon } = trips;
  const from = trips.tripOffset[k];
  const to = trips.tripOffset[k + 1];
  const plane = planeAt(lat[from], lon[from]);
  let n = 0;
  let nextMs = -Infinity;
  for (let i = from; i < to; i++) {
    if (tMs[i] < nextMs && i < to - 1) continue;
    nextMs = tMs[i] + MATCHING.thinS * 1000;
    work.ping[n] = i;
    work.x[n] = eastM(plane, lon[i]);
    work.y[n] = northM(plane, lat[i]);
    n += 1;
  }
  return n;
}

function placePings(trips: Trips, graph: StreetGraph, work: Work, states: number): boolean {
  // Cells first, in a loop of their own: looked up apart from each other, their memory is waited for but once.
  for (let n = 0; n < states; n++) work.cell[n] = cellAt(graph.grid, trips.lat[work.ping[n]], trips.lon[work.ping[n]]);
  let any = false;
  for (let n = 0; n < states; n++) {
    const i = work.ping[n];
    any = findCandidates(graph, work.cell[n], trips.lat[i], trips.lon[i], trips.headingDeg[i], trips.speedMs[i], work.near, n) > 0 || any;
  }
  return any;
}

function decode(trips: Trips, graph: StreetGraph, work: Work, states: number): void {
  const { near, cost, back } = work;
  for (let c = 0; c < near.count[0]; c++) cost[c] = near.cost[c];
  cost[OFF] = MATCHING.offCost;
  for (let n = 1; n < states; n++) {
    const seconds = secondsBetween(trips, work, n - 1, n);
    const chord = chordBetween(work, n - 1, n);
    const row = n * WIDTH;
    const before = row - WIDTH;
    const places = near.count[n - 1];
    const first = (n - 1) * MATCHING.candidates;
    const likeliest = cheapest(work, n - 1);
    const left = likeliest < 0 ? Infinity : cost[before + likeliest] + MATCHING.leaveCost;
    const isOff = cost[before + OFF] <= left;
    for (let c = 0; c < near.count[n]; c++) {
      const to = n * MATCHING.candidates + c;
      let best = Math.min(cost[before + OFF], left) + MATCHING.joinCost;
      let from = isOff ? OFF : likeliest;
      let isWay = 0;
      // The likeliest place first: after it most others are too dear to be looked at.
      for (let k = 0; k < places; k++) {
        const p = k === 0 ? likeliest : k <= likeliest ? k - 1 : k;
        const reached = cost[before + p];
        if (reached >= best) continue;
        const step = stepCost(graph, near, first + p, to, chord, seconds);
        if (reached + step < best) {
          best = reached + step;
          from = p;
          isWay = 1;
        }
      }
      work.isWay[row + c] = isWay;
      cost[row + c] = best + near.cost[to];
      back[row + c] = from;
    }
    cost[row + OFF] = Math.min(cost[before + OFF], left) + MATCHING.offCost;
    back[row + OFF] = isOff ? OFF : likeliest;
  }
  trackBack(work, states);
}

/** The likeliest place of a ping so far, -1 without any: from there a step may lead over unknown streets to any other. */
function cheapest({ near, cost }: Work, n: number): number {
  let least = near.count[n] > 0 ? 0 : -1;
  for (let p = 1; p < near.count[n]; p++) if (cost[n * WIDTH + p] < cost[n * WIDTH + least]) least = p;
  return least;
}

function secondsBetween(trips: Trips, work: Work, a: number, b: number): number {
  return (trips.tMs[work.ping[b]] - trips.tMs[work.ping[a]]) / 1000;
}

function chordBetween(work: Work, a: number, b: number): number {
  const dx = work.x[b] - work.x[a];
  const dy = work.y[b] - work.y[a];
  return Math.sqrt(dx * dx + dy * dy);
}

function trackBack(work: Work, states: number): void {
  const last = (states - 1) * WIDTH;
  let state = OFF;
  for (let c = 0; c < work.near.count[states - 1]; c++) if (work.cost[last + c] < work.cost[last + state]) state = c;
  for (let n = states - 1; n >= 0; n--) {
    work.chosen[n] = state;
    if (n > 0) state = work.back[n * WIDTH + state];
  }
}

/** Cost of going from one place to another in the given time; Infinity where no way costs less than DEAREST_STEP. */
function stepCost(graph: StreetGraph, near: Candidates, a: number, b: number, chord: number, seconds: number): number {
  const from = near.link[a];
  const to = near.link[b];
  const reach = MATCHING.fastestMs * seconds + MATCHING.reachSpareM;
  let cost = 0;
  let way = near.position[b] - near.position[a];
  if (from !== to || way < -MATCHING.loopM) {
    const { routes } = graph;
    const row = routes.find(from, to, longestWay(reach, chord));
    if (row < 0) return Infinity;
    way = graph.stopAt[from] - near.position[a] + routes.wayM[row] + near.position[b];
    cost = routes.cost[row];
  }
  if (way < -MATCHING.backFreeM) cost += (-way - MATCHING.backFreeM) / MATCHING.backSpreadM;
  if (way > reach) cost += (way - reach) / MATCHING.reachSpreadM;
  const detour = way > 0 ? Math.abs(way - chord) : chord;
  return cost + detour / (MATCHING.detourM + MATCHING.detourShare * chord);
}

/** Any longer way costs DEAREST_STEP or more. */
function longestWay(reach: number, chord: number): number {
  return Math.min(reach + DEAREST_STEP * MATCHING.reachSpreadM, chord + DEAREST_STEP * (MATCHING.detourM + MATCHING.detourShare * chord));
}

function collectChains(
  trips: Trips, graph: StreetGraph, work: Work, states: number, trip: number, visit: (chain: Chain) => void,
): void {
  let chain: Chain | null = null;
  let last = -1;
  for (let n = 0; n < states; n++) {
    const c = work.chosen[n];
    if (c === OFF) continue;
    const at = n * MATCHING.candidates + c;
    const joined: boolean = chain !== null && isJoined(trips, graph, work, last, n) && append(chain, graph, work, last, n, at);
    if (!joined) {
      if (chain && chain.pings.length > 1) visit(chain);
      chain = { trip, links: [work.near.link[at]], pings: [work.ping[n]], step: [0], position: [work.near.position[at]] };
    }
    last = n;
  }
  if (chain && chain.pings.length > 1) visit(chain);
}

/** Whether a vehicle hardly moved between two states: stray pings in between are the noise of a long wait. */
function isWaiting(trips: Trips, work: Work, before: number, n: number): boolean {
  return chordBetween(work, before, n) < MATCHING.waitingM && secondsBetween(trips, work, before, n) < MATCHING.waitingMostS;
}

/** Whether the way between two placed states fits the time and the chord; else the step led over unknown streets. */
function isJoined(trips: Trips, graph: StreetGraph, work: Work, before: number, n: number): boolean {
  if (n === before + 1) return work.isWay[n * WIDTH + work.chosen[n]] === 1;
  if (n - before - 1 > MATCHING.bridgePings && !isWaiting(trips, work, before, n)) return false;
  const [from, to] = [before * MATCHING.candidates + work.chosen[before], n * MATCHING.candidates + work.chosen[n]];
  return stepCost(graph, work.near, from, to, chordBetween(work, before, n), secondsBetween(trips, work, before, n)) <= DEAREST_STEP;
}

/** Adds a place to a chain, with the links on the way to it; false where there is no way. */
function append(chain: Chain, graph: StreetGraph, work: Work, before: number, n: number, at: number): boolean {
  const from = chain.links[chain.links.length - 1];
  const link = work.near.link[at];
  const position = work.near.position[at];
  const previous = before * MATCHING.candidates + work.chosen[before];
  if (link !== from || position - work.near.position[previous] < -MATCHING.loopM) {
    const row = graph.routes.find(from, link, 0);
    if (row < 0) return false;
    chain.links.push(...graph.routes.linksOn(row), link);
  }
  chain.pings.push(work.ping[n]);
  chain.step.push(chain.links.length - 1);
  chain.position.push(position);
  return true;
}
