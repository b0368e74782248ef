import type { StreetGraph } from "@/core/match/graph";
import { DEAREST_STEP, MATCHING } from "@/core/match/matching";
import { chordBetween, OFF, secondsBetween, stepCost, WIDTH, type Trellis } from "@/core/match/trellis";
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

/** Cuts the decoded path of a trip into the stretches that stayed on the network, and visits those of two pings and more. */
export function collectChains(
  trips: Trips, graph: StreetGraph, trellis: Trellis, states: number, trip: number, visit: (chain: Chain) => void,
): void {
  let chain: Chain | null = null;
  let last = -1;
  for (let n = 0; n < states; n++) {
    const c = trellis.chosen[n];
    if (c === OFF) continue;
    const at = n * MATCHING.candidates + c;
    const joined: boolean = chain !== null && isJoined(trips, graph, trellis, last, n) && append(chain, graph, trellis, last, n, at);
    if (!joined) {
      if (chain && chain.pings.length > 1) visit(chain);
      chain = { trip, links: [trellis.near.link[at]], pings: [trellis.ping[n]], step: [0], position: [trellis.near.position[at]] };
    }
    last = n;
  }
  if (chain && chain.pings.length > 1) visit(chain);
}

/** Whether a vehicle hardly moved between two states: stray pings in between are the noise of a long wait. */
function isWaiting(trips: Trips, trellis: Trellis, before: number, n: number): boolean {
  return chordBetween(trellis, before, n) < MATCHING.waitingM && secondsBetween(trips, trellis, before, n) < MATCHING.waitingMostS;
}

/** Whether the way between two placed states fits the time and the chord; else the step led over unknown streets. */
function isJoined(trips: Trips, graph: StreetGraph, trellis: Trellis, before: number, n: number): boolean {
  if (n === before + 1) return trellis.isWay[n * WIDTH + trellis.chosen[n]] === 1;
  if (n - before - 1 > MATCHING.bridgePings && !isWaiting(trips, trellis, before, n)) return false;
  const [from, to] = [before * MATCHING.candidates + trellis.chosen[before], n * MATCHING.candidates + trellis.chosen[n]];
  return stepCost(graph, trellis.near, from, to, chordBetween(trellis, before, n), secondsBetween(trips, trellis, before, n)) <= DEAREST_STEP;
}

/** Adds a place to a chain, with the links on the way to it; false where there is no way. */
function append(chain: Chain, graph: StreetGraph, trellis: Trellis, before: number, n: number, at: number): boolean {
  const from = chain.links[chain.links.length - 1];
  const link = trellis.near.link[at];
  const position = trellis.near.position[at];
  const previous = before * MATCHING.candidates + trellis.chosen[before];
  if (link !== from || position - trellis.near.position[previous] < -MATCHING.loopM) {
    const row = graph.routes.find(from, link, 0);
    if (row < 0) return false;
    chain.links.push(...graph.routes.linksOn(row), link);
  }
  chain.pings.push(trellis.ping[n]);
  chain.step.push(chain.links.length - 1);
  chain.position.push(position);
  return true;
}
