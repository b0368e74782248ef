import { columnReach } from "./column-reach";
import type { QueueOptions } from "./options";
import type { Standings } from "./standings";

/** One standing column: the vehicles seen in it, and where the last one stood. */
export interface StandingColumn {
  seen: number;
  reachM: number;
}

/** Columns of one leg (standings `from` to `to`): what overlaps the first standing in time and hangs together. O(standings × log). */
export function columnsOfLeg(standings: Standings, from: number, to: number, options: QueueOptions): StandingColumn[] {
  const columns: StandingColumn[] = [];
  for (let k = from; k < to; ) {
    const until = standings.toMs[k];
    const positions = [];
    for (; k < to && standings.fromMs[k] <= until; k++) positions.push(standings.s[k]);
    positions.sort((a, b) => a - b);
    const reachM = columnReach(positions, positions.length, options.headM, options.gapM);
    const seen = positions.filter((s) => s <= reachM).length;
    if (seen > 0) columns.push({ seen, reachM });
  }
  return columns;
}
