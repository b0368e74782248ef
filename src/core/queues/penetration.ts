import { quantile } from "@/core/stats/quantile";
import type { Network, Traversals } from "@/core/types";
import { columnsOfLeg } from "./columns-of-leg";
import { DEFAULT_QUEUE_OPTIONS, type QueueOptions } from "./options";
import { findStandings, standingsByLeg, type Standings } from "./standings";

/** Fewer places than this in all say nothing useful about the share seen; on one leg, nothing about that leg. */
const LEAST_PLACES = 200;
const LEAST_PLACES_OF_LEG = 60;
/** With fewer legs than this there is no telling which have one lane. */
const LEAST_LEGS = 8;
const NARROW_QUARTILE = 0.25;

/**
 * Share of traffic in the sample, from standing columns: Σ(n - 1) / Σ(L - 1) over columns with n seen vehicles, the
 * last at place L; leaving the last one out makes it unbiased (Wong et al., Transportation Research Part B 126, 2019).
 * Places are counted for one lane, and legs with more lanes show a multiple: the lower quartile of the legs is taken,
 * which in most cities is a leg of one lane. Still an upper bound, good to about a half. NaN where too few stood.
 */
export function penetrationFromQueues(network: Network, traversals: Traversals, options: Partial<QueueOptions> = {}): number {
  const chosen: QueueOptions = { ...DEFAULT_QUEUE_OPTIONS, ...options };
  const standings = findStandings(network, traversals, chosen);
  return penetrationOf(placeSums(standings, standingsByLeg(standings, network.legs.length), chosen));
}

/** Vehicles before the last one of each standing column, and places up to it, summed by leg. */
export interface PlaceSums {
  ahead: Float64Array;
  places: Float64Array;
}

/** First half of `penetrationFromQueues`, leg by leg; standings of open tracks take no part. O(standings × log). */
export function placeSums(standings: Standings, offset: Uint32Array, options: QueueOptions): PlaceSums {
  const ahead = new Float64Array(offset.length - 1);
  const places = new Float64Array(offset.length - 1);
  for (let leg = 0; leg < ahead.length; leg++) {
    for (const { seen, reachM } of columnsOfLeg(standings, offset[leg], offset[leg + 1], options)) {
      ahead[leg] += seen - 1;
      places[leg] += Math.max(seen - 1, Math.round(reachM / options.jamSpacingM));
    }
  }
  return { ahead, places };
}

/** Second half of `penetrationFromQueues`: needs the sums of all legs of the city. */
export function penetrationOf({ ahead, places }: PlaceSums): number {
  const all = { ahead: 0, places: 0 };
  const byLeg: number[] = [];
  for (let leg = 0; leg < ahead.length; leg++) {
    all.ahead += ahead[leg];
    all.places += places[leg];
    if (places[leg] >= LEAST_PLACES_OF_LEG) byLeg.push(ahead[leg] / places[leg]);
  }
  if (all.places < LEAST_PLACES) return NaN;
  return byLeg.length < LEAST_LEGS ? all.ahead / all.places : quantile(byLeg, NARROW_QUARTILE);
}
