import { columnReach } from "./column-reach";
import type { QueueOptions } from "./options";
import type { Standings } from "./standings";

/** One standing column: the vehicles seen in it, and where the last one stood. */
export interface StandingColumn {
  seen: number;
  reachM: number;
}

/**
 * Columns of one leg (standings `from` to `to`): what stood before the discharge that freed the first standing came by,
 * and hangs together. The discharge runs upstream at the wave speed. O(standings × log).
 */
export function columnsOfLeg(standings: Standings, from: number, to: number, options: QueueOptions): StandingColumn[] {
  const columns: StandingColumn[] = [];
  const lagMs = (k: number): number => (standings.s[k] / options.waveSpeedMs) * 1000;
  for (let k = from; k < to; ) {
    const until = standings.toMs[k] - lagMs(k);
    const positions = [];
    for (; k < to && standings.fromMs[k] - lagMs(k) <= until; k++) positions.push(standings.s[k]);
    positions.sort((a, b) => a - b);
    const reachM = columnReach(positions, positions.length, options.headM, options.gapM);
    const seen = positions.filter((s) => s <= reachM).length;
    if (seen > 0) columns.push({ seen, reachM });
  }
  return columns;
}
