import type { Network, Traversals } from "@/core/types";
import { columnReach } from "./column-reach";
import { DEFAULT_QUEUE_OPTIONS, type QueueOptions } from "./options";
import { findStandings } from "./standings";

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
  let seen = 0;
  let places = 0;
  for (let i = 0; i < standings.length; ) {
    // One column: standings of a leg that overlap the first of them.
    const positions = [];
    const until = standings.toMs[i];
    const leg = standings.leg[i];
    for (; i < standings.length && standings.leg[i] === leg && standings.fromMs[i] <= until; i++) positions.push(standings.s[i]);
    positions.sort((a, b) => a - b);
    const reach = columnReach(positions, positions.length, chosen.headM, chosen.gapM);
    const n = positions.filter((s) => s <= reach).length;
    if (n === 0) continue;
    seen += n - 1;
    places += Math.max(n - 1, Math.round(reach / chosen.jamSpacingM));
  }
  return places < LEAST_PLACES ? NaN : seen / places;
}
