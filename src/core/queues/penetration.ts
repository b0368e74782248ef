import type { Network, Traversals } from "@/core/types";
import { columnsOfLeg } from "./columns-of-leg";
import { DEFAULT_QUEUE_OPTIONS, type QueueOptions } from "./options";
import { findStandings, standingsByLeg } from "./standings";

/** Fewer unseen places than this say nothing useful about the share seen. */
const LEAST_PLACES = 200;

/**
 * Share of traffic in the sample, from standing columns: Σ(n - 1) / Σ(L - 1) over columns with n seen vehicles, the
 * last at place L; leaving the last one out makes it unbiased (Wong et al., Transportation Research Part B 126, 2019).
 * Places are counted for one lane, so the figure is an upper bound where legs have several. NaN where too few stood.
 */
export function penetrationFromQueues(network: Network, traversals: Traversals, options: Partial<QueueOptions> = {}): number {
  const chosen: QueueOptions = { ...DEFAULT_QUEUE_OPTIONS, ...options };
  const standings = findStandings(network, traversals, chosen);
  const offset = standingsByLeg(standings, network.legs.length);
  let ahead = 0;
  let places = 0;
  for (let leg = 0; leg < network.legs.length; leg++) {
    for (const { seen, reachM } of columnsOfLeg(standings, offset[leg], offset[leg + 1], chosen)) {
      ahead += seen - 1;
      places += Math.max(seen - 1, Math.round(reachM / chosen.jamSpacingM));
    }
  }
  return places < LEAST_PLACES ? NaN : ahead / places;
}
