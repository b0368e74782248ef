import { eastM, northM, planeAt } from "@/core/geometry/plane";
import { findCandidates } from "@/core/match/candidates";
import { collectChains, type Chain } from "@/core/match/chains";
import type { StreetGraph } from "@/core/match/graph";
import { cellAt } from "@/core/match/link-grid";
import { MATCHING } from "@/core/match/matching";
import { chordBetween, createTrellis, OFF, secondsBetween, stepCost, WIDTH, type Trellis } from "@/core/match/trellis";
import type { Trips } from "@/core/pings/trips";

/**
 * Most likely path of every trip by a hidden Markov model: states are places on links and one state off the network;
 * Viterbi's algorithm (after Newson and Krumm, Hidden Markov map matching through noise and sparseness, 2009).
 * Calls `visit` for each stretch on the network. O(pings x candidates squared).
 */
export function matchTrips(trips: Trips, graph: StreetGraph, visit: (chain: Chain) => void): void {
  const trellis = createTrellis(trips);
  for (let k = 0; k < trips.count; k++) {
    const states = thinTrip(trips, k, trellis);
    if (states < 2) continue;
    if (!placePings(trips, graph, trellis, states)) continue;
    decode(trips, graph, trellis, states);
    collectChains(trips, graph, trellis, states, k, visit);
  }
}

/** Keeps pings at least MATCHING.thinS apart; the first and the last always stay. */
function thinTrip(trips: Trips, k: number, trellis: Trellis): number {
  const { tMs, lat, lon } = trips;
  const from = trips.tripOffset[k];
  const to = trips.tripOffset[k + 1];
  const plane = planeAt(lat[from], lon[from]);
  let n = 0;
  let nextMs = -Infinity;
  for (let i = from; i < to; i++) {
    if (tMs[i] < nextMs && i < to - 1) continue;
    nextMs = tMs[i] + MATCHING.thinS * 1000;
    trellis.ping[n] = i;
    trellis.x[n] = eastM(plane, lon[i]);
    trellis.y[n] = northM(plane, lat[i]);
    n += 1;
  }
  return n;
}

function placePings(trips: Trips, graph: StreetGraph, trellis: Trellis, states: number): boolean {
  // Cells first, in a loop of their own: looked up apart from each other, their memory is waited for but once.
  for (let n = 0; n < states; n++) trellis.cell[n] = cellAt(graph.grid, trips.lat[trellis.ping[n]], trips.lon[trellis.ping[n]]);
  let any = false;
  for (let n = 0; n < states; n++) {
    const i = trellis.ping[n];
    any = findCandidates(graph, trellis.cell[n], trips.lat[i], trips.lon[i], trips.headingDeg[i], trips.speedMs[i], trellis.near, n) > 0 || any;
  }
  return any;
}

function decode(trips: Trips, graph: StreetGraph, trellis: Trellis, states: number): void {
  const { near, cost, back } = trellis;
  for (let c = 0; c < near.count[0]; c++) cost[c] = near.cost[c];
  cost[OFF] = MATCHING.offCost;
  for (let n = 1; n < states; n++) {
    const seconds = secondsBetween(trips, trellis, n - 1, n);
    const chord = chordBetween(trellis, n - 1, n);
    const row = n * WIDTH;
    const before = row - WIDTH;
    const places = near.count[n - 1];
    const first = (n - 1) * MATCHING.candidates;
    const likeliest = cheapest(trellis, n - 1);
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
      trellis.isWay[row + c] = isWay;
      cost[row + c] = best + near.cost[to];
      back[row + c] = from;
    }
    cost[row + OFF] = Math.min(cost[before + OFF], left) + MATCHING.offCost;
    back[row + OFF] = isOff ? OFF : likeliest;
  }
  trackBack(trellis, states);
}

/** The likeliest place of a ping so far, -1 without any: from there a step may lead over unknown streets to any other. */
function cheapest({ near, cost }: Trellis, n: number): number {
  let least = near.count[n] > 0 ? 0 : -1;
  for (let p = 1; p < near.count[n]; p++) if (cost[n * WIDTH + p] < cost[n * WIDTH + least]) least = p;
  return least;
}

function trackBack(trellis: Trellis, states: number): void {
  const last = (states - 1) * WIDTH;
  let state = OFF;
  for (let c = 0; c < trellis.near.count[states - 1]; c++) if (trellis.cost[last + c] < trellis.cost[last + state]) state = c;
  for (let n = states - 1; n >= 0; n--) {
    trellis.chosen[n] = state;
    if (n > 0) state = trellis.back[n * WIDTH + state];
  }
}
