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
  const fullM = options.spillShare * leg.storageM;
  const figures: QuarterFigures = { reachM: 0, reachEstimateM: 0, spilledS: leg.storageM > 0 ? 0 : NaN, observedS: 0 };
  figures.observedS = eachMoment(leg, startMs, options, scratch, (_, reachM, tailM) => {
    figures.reachM = Math.max(figures.reachM, reachM);
    figures.reachEstimateM = Math.max(figures.reachEstimateM, reachM, tailM);
    if (tailM >= fullM) figures.spilledS += options.stepS;
  });
  figures.spilledS = Math.min(figures.spilledS, figures.observedS);
  return figures;
}
