import type { StreetGraph } from "@/core/match/graph";
import { matchTrips } from "@/core/match/match-trips";
import type { Trips } from "@/core/pings/trips";

/** What matched traffic makes of a draft network. */
export interface Usage {
  /** Trips that left each leg through its junction. */
  leg: Uint32Array;
  /** Trips that came out of each exit. */
  exit: Uint32Array;
  /** Trips that drove from a leg's upstream exit onto the leg. */
  fed: Uint32Array;
  /** Trips by leg and exit: key leg * exits + exit. */
  movement: Map<number, number>;
  /** Moving speeds on each leg away from junctions, m/s. */
  speeds: number[][];
  /** Distances to the stop line at which pings stood, nearest first for each passage, by leg. */
  heads: number[][];
  /** Passages of each leg with a standing ping on it. */
  stood: Uint32Array;
}

/** Nearest to a junction at which speeds count as free of it, m. */
const CLEAR_M = 60;

/** Matches all trips and counts. O(pings). */
export function measureUsage(trips: Trips, graph: StreetGraph): Usage {
  const { network } = graph;
  const usage: Usage = {
    leg: new Uint32Array(network.legs.length),
    exit: new Uint32Array(network.exits.length),
    fed: new Uint32Array(network.legs.length),
    movement: new Map(),
    speeds: network.legs.map(() => []),
    heads: network.legs.map(() => []),
    stood: new Uint32Array(network.legs.length),
  };
  matchTrips(trips, graph, (chain) => {
    let k = 0;
    let head = NaN;
    const closeHead = (step: number): void => {
      const leg = graph.leg[chain.links[step]];
      if (head >= -15 && leg >= 0) {
        usage.heads[leg].push(head);
        usage.stood[leg] += 1;
      }
      head = NaN;
    };
    for (let c = 0; c < chain.pings.length; c++) {
      if (chain.step[c] !== k) {
        closeHead(k);
        k = chain.step[c];
      }
      const link = chain.links[k];
      const leg = graph.leg[link];
      if (leg < 0) continue;
      const toLine = graph.stopAt[link] - chain.position[c];
      const speed = trips.speedMs[chain.pings[c]];
      if (speed < 1) head = toLine;
      const isClear = toLine > CLEAR_M && chain.position[c] > CLEAR_M / 2;
      if (isClear && speed > 2.5 && usage.speeds[leg].length < 4000) usage.speeds[leg].push(speed);
    }
    closeHead(k);
    countPassages(chain.links, graph, usage);
  });
  return usage;
}

function countPassages(links: number[], graph: StreetGraph, usage: Usage): void {
  for (let k = 0; k + 1 < links.length; k++) {
    const leg = graph.leg[links[k]];
    const exit = graph.exit[links[k + 1]];
    usage.leg[leg] += 1;
    usage.exit[exit] += 1;
    const next = graph.leg[links[k + 1]];
    if (next >= 0) usage.fed[next] += 1;
    const key = leg * graph.network.exits.length + exit;
    usage.movement.set(key, (usage.movement.get(key) ?? 0) + 1);
  }
}
