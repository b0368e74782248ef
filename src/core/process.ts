import type { JunctionIndex } from "@/core/index/junction-index";
import { learnFromTrips } from "@/core/legs/learn-network";
import { createGraph } from "@/core/match/graph";
import { cellAt } from "@/core/match/link-grid";
import { matchTrips } from "@/core/match/match-trips";
import type { CoreOptions } from "@/core/options";
import { cleanPings } from "@/core/pings/clean";
import type { Trips } from "@/core/pings/trips";
import { penetrationFromQueues } from "@/core/queues/penetration";
import { createTraversalBuilder } from "@/core/traversals/columns";
import { createExtractor } from "@/core/traversals/extract";
import { createOpenTrackBuilder } from "@/core/traversals/open-tracks";
import { setReferences } from "@/core/traversals/references";
import type { CleanReport, JunctionPoint, Network, OpenTracks, PingColumns, SampleFacts, Traversals } from "@/core/types";

export type { CoreOptions, GivenLeg } from "@/core/options";
export type { JunctionIndex } from "@/core/index/junction-index";
export { setReferences };

export interface Matched {
  /** `delayS` is NaN until setReferences has run over all traversals. */
  traversals: Traversals;
  openTracks: OpenTracks;
  report: CleanReport;
  facts: SampleFacts;
}

export interface CityResult {
  network: Network;
  traversals: Traversals;
  openTracks: OpenTracks;
  clean: CleanReport;
  facts: SampleFacts;
}

/**
 * Stage 4: legs, exits, links and movements from a sample of the pings or all of them. Whole vehicles must be in
 * the batch; about as many pings as learningPings asks for are enough, and no more are taken. `prior` is an earlier
 * network whose legs keep their ids. O(pings).
 */
export function learnNetwork(
  pings: PingColumns, junctions: JunctionPoint[], index: JunctionIndex, options: CoreOptions, prior?: Network,
): Network {
  return learnFromTrips(cleanPings(pings).trips, junctions, index, options, prior);
}

/** Stage 5: matches batches of whole vehicles over one network: build it once, call it for each batch. Each vehicle's result is independent of all others. O(pings). */
export function createMatcher(network: Network): (pings: PingColumns) => Matched {
  const graph = createGraph(network);
  return (pings) => {
    const cleaned = cleanPings(pings);
    return matchCleaned(cleaned.trips, cleaned.report, graph);
  };
}

/** Stages 2 to 6 on one batch in memory, and the share of traffic that it shows. */
export function processCity(
  pings: PingColumns, junctions: JunctionPoint[], index: JunctionIndex, options: CoreOptions, prior?: Network,
): CityResult {
  const cleaned = cleanPings(pings);
  const network = learnFromTrips(cleaned.trips, junctions, index, options, prior);
  const matched = matchCleaned(cleaned.trips, cleaned.report, createGraph(network));
  setReferences(network, matched.traversals);
  const facts = { ...matched.facts, penetration: penetrationFromQueues(network, matched.traversals) };
  return { network, traversals: matched.traversals, openTracks: matched.openTracks, clean: matched.report, facts };
}

function matchCleaned(
  trips: Trips, report: Pick<CleanReport, "pings" | "duplicates" | "jumps" | "trips">,
  graph: ReturnType<typeof createGraph>,
): Matched {
  const builder = createTraversalBuilder();
  const open = createOpenTrackBuilder();
  const extractor = createExtractor(trips, graph, builder, open);
  let incompleteTraversals = 0;
  matchTrips(trips, graph, (chain) => {
    incompleteTraversals += extractor.addChain(chain);
  });
  let farFromJunctions = 0;
  for (let i = 0; i < trips.length; i++) if (cellAt(graph.grid, trips.lat[i], trips.lon[i]) < 0) farFromJunctions += 1;
  return {
    traversals: builder.finish(),
    openTracks: open.finish(),
    report: { ...report, farFromJunctions, incompleteTraversals },
    facts: sampleFacts(trips),
  };
}

function sampleFacts(trips: Trips): SampleFacts {
  return {
    medianIntervalS: trips.medianIntervalS,
    hasSpeed: trips.hasSpeed,
    hasHeading: trips.hasHeading,
    // Cleaning leaves every vehicle a ping.
    vehicles: new Set(trips.tripVehicle).size,
    penetration: NaN,
  };
}
