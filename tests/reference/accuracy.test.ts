import { describe, expect, it } from "vitest";

import { measureAccuracy, readAccuracy } from "./accuracy";
import type { AccuracyRow } from "./accuracy";
import { readRecording } from "./recording";
import { LEAST_RANKED } from "./requirements";
import { MAIN_SAMPLINGS } from "./samplings";
import { HOLD_OUT, TUNING } from "./scenarios/index";

/** How much worse than the table a figure may be before it counts as worse: a change of rounding, not of method. */
const SLACK = { share: 0.005, delayS: 0.15, biasS: 0.3, stopShare: 0.005, reachM: 1.5, rank: 0.01 };

/** The first two samplings: the sparser ones rest on too few vehicles to be a tripwire. */
const WATCHED = MAIN_SAMPLINGS.slice(0, 2);

/** Figures of a row of which less is better; what beats the oracle by chance counts as its equal. */
function lossesOf({ scores, junctions }: AccuracyRow): Record<string, [value: number, slack: number]> {
  const excess = (pair: { ours: number; oracle: number }) => Math.max(0, pair.ours - pair.oracle);
  const rankLoss = (pair: { ours: number; oracle: number }) => (junctions < LEAST_RANKED ? 0 : Math.max(0, pair.oracle - pair.ours));
  return {
    "legs missed": [1 - scores.legRecall, SLACK.share],
    "legs invented": [1 - scores.legPrecision, SLACK.share],
    "turns wrong": [1 - scores.turnsRight, SLACK.share],
    "count error": [scores.countError, SLACK.share],
    "traffic without a figure": [1 - scores.coverage, SLACK.share],
    "delay above the oracle": [excess(scores.delayMaeS), SLACK.delayS],
    "bias apart from the oracle": [Math.abs(scores.delayBiasS.ours - scores.delayBiasS.oracle), SLACK.biasS],
    "stop share above the oracle": [excess(scores.stopShareMae), SLACK.stopShare],
    "reach above the oracle": [excess(scores.reachMaeM), SLACK.reachM],
    "rank by delay below the oracle": [rankLoss(scores.rankByDelay), SLACK.rank],
    "rank by vehicle-hours below the oracle": [rankLoss(scores.rankByVehicleHours), SLACK.rank],
  };
}

describe("accuracy against known truth", () => {
  const table = readAccuracy();
  for (const scenario of [...TUNING, ...HOLD_OUT]) {
    it(`is no worse than stated on ${scenario.id}`, { timeout: 120_000 }, () => {
      const recording = readRecording(scenario.id);
      for (const sampling of WATCHED) {
        const stated = table.rows.find((row) => row.scenario === scenario.id && row.sampling === sampling.name);
        if (!stated) throw new Error(`accuracy.json has no line for ${scenario.id} at ${sampling.name}.`);
        const now = measureAccuracy(recording, sampling, stated.isHoldOut);
        const before = lossesOf(stated);
        const worse = Object.entries(lossesOf(now))
          .filter(([name, [value, slack]]) => value > before[name][0] + slack)
          .map(([name, [value]]) => `${sampling.name}: ${name} ${value.toFixed(3)}, stated ${before[name][0].toFixed(3)}`);
        expect(worse).toEqual([]);
        expect(now.missed.filter((figure) => !stated.missed.includes(figure))).toEqual([]);
      }
    });
  }
});
