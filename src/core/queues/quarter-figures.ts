import { fullFromM } from "./full-from";
import { eachMoment, type LegView, type Scratch } from "./moments";
import type { QueueOptions } from "./options";

/** What one quarter of one leg showed. */
export interface QuarterFigures {
  reachM: number;
  reachEstimateM: number;
  spilledS: number;
  observedS: number;
}

/** Sums the moments of one quarter up. O(moments × standing²). */
export function quarterFigures(leg: LegView, startMs: number, options: QueueOptions, scratch: Scratch): QuarterFigures {
  const fullM = fullFromM(leg.storageM, options);
  const figures: QuarterFigures = { reachM: 0, reachEstimateM: 0, spilledS: Number.isNaN(fullM) ? NaN : 0, observedS: 0 };
  figures.observedS = eachMoment(leg, startMs, options, scratch, (_, reachM, tail) => {
    figures.reachM = Math.max(figures.reachM, reachM);
    figures.reachEstimateM = Math.max(figures.reachEstimateM, reachM, tail.expectedM, tail.farthestM);
    if (tail.leastM >= fullM) figures.spilledS += options.stepS;
  });
  return figures;
}
