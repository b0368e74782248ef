import { quantile } from "@/core/stats/quantile";
import type { Network, Traversals } from "@/core/types";
import { columnsOfLeg } from "./columns-of-leg";
import { DEFAULT_QUEUE_OPTIONS, type QueueOptions } from "./options";
import { findStandings, standingsByLeg } from "./standings";

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
  const offset = standingsByLeg(standings, network.legs.length);
  const all = { ahead: 0, places: 0 };
  const byLeg: number[] = [];
  for (let leg = 0; leg < network.legs.length; leg++) {
    const own = { ahead: 0, places: 0 };
    for (const { seen, reachM } of columnsOfLeg(standings, offset[leg], offset[leg + 1], chosen)) {
      own.ahead += seen - 1;
      own.places += Math.max(seen - 1, Math.round(reachM / chosen.jamSpacingM));
    }
    all.ahead += own.ahead;
    all.places += own.places;
    if (own.places >= LEAST_PLACES_OF_LEG) byLeg.push(own.ahead / own.places);
  }
  if (all.places < LEAST_PLACES) return NaN;
  return byLeg.length < LEAST_LEGS ? all.ahead / all.places : quantile(byLeg, NARROW_QUARTILE);
}
