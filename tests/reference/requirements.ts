import type { Scores } from "./score";

/** What the core has to reach at one sampling; a figure that is not claimed there is left out. */
export interface Requirement {
  legs: number;
  turnsRight: number;
  countError: number;
  /** Above the oracle's. */
  delayExcessS: number;
  biasExcessS: number;
  stopShareExcess?: number;
  reachExcessM?: number;
  /** Below the oracle's. */
  spillbackLoss?: number;
  rankLoss: number;
}

/** By the name of the sampling. */
export const REQUIREMENTS: Record<string, Requirement> = {
  "20 %, 5 s": {
    legs: 0.99, turnsRight: 0.99, countError: 0.02, delayExcessS: 1, biasExcessS: 1,
    stopShareExcess: 0.03, reachExcessM: 5, spillbackLoss: 0, rankLoss: 0.02,
  },
  "10 %, 15 s": {
    legs: 0.98, turnsRight: 0.97, countError: 0.06, delayExcessS: 2, biasExcessS: 1.5,
    reachExcessM: 12, spillbackLoss: 0.1, rankLoss: 0.03,
  },
  "5 %, 30 s": { legs: 0.85, turnsRight: 0.93, countError: 0.1, delayExcessS: 3.5, biasExcessS: 2.5, rankLoss: 0.05 },
  "5 %, 30 s, legs known": { legs: 0.95, turnsRight: 0.93, countError: 0.1, delayExcessS: 3.5, biasExcessS: 2.5, rankLoss: 0.05 },
};

/** Rank correlations of fewer junctions say little. */
export const LEAST_RANKED = 15;

/** Names of the figures that miss the requirement; ranks count only in networks of at least 15 junctions. */
export function missedFigures(scores: Scores, required: Requirement, junctions: number): string[] {
  const below = (pair: { ours: number; oracle: number }, loss: number) => pair.ours < pair.oracle - loss - 1e-9;
  const misses: [string, boolean][] = [
    ["leg recall", scores.legRecall < required.legs],
    ["leg precision", scores.legPrecision < required.legs],
    ["turns", scores.turnsRight < required.turnsRight],
    ["count", scores.countError > required.countError],
    ["delay", scores.delayMaeS.ours - scores.delayMaeS.oracle > required.delayExcessS],
    ["bias", Math.abs(scores.delayBiasS.ours - scores.delayBiasS.oracle) > required.biasExcessS],
    ["stop share", scores.stopShareMae.ours - scores.stopShareMae.oracle > (required.stopShareExcess ?? Infinity)],
    ["reach", scores.reachMaeM.ours - scores.reachMaeM.oracle > (required.reachExcessM ?? Infinity)],
    ["spillback precision", below(scores.spillbackPrecision, required.spillbackLoss ?? Infinity)],
    ["spillback recall", below(scores.spillbackRecall, required.spillbackLoss ?? Infinity)],
    ["rank by delay", junctions >= LEAST_RANKED && below(scores.rankByDelay, required.rankLoss)],
    ["rank by vehicle-hours", junctions >= LEAST_RANKED && below(scores.rankByVehicleHours, required.rankLoss)],
  ];
  return misses.filter(([, isMissed]) => isMissed).map(([name]) => name);
}
