import { buildScreenDays } from "@/core/scores/build-screen-days";
import { indexCatalogue } from "@/core/scores/catalogue-index";
import { dayByJunction } from "@/core/scores/day-by-junction";
import { scoreScreen } from "@/core/scores/score-screen";
import { legQuarters } from "@/core/queues/leg-quarters";

import type { CoreRun } from "../run-core";
import { hashUnit } from "../random";
import { groupRows, matchLegs } from "./match-legs";

/** Intervals on fewer traversals than this are not shown, so they are not counted. */
const LEAST_SHOWN = 5;

export interface IntervalCoverage {
  inside: number;
  intervals: number;
}

/**
 * How many of the 95 % intervals for a movement's mean delay hold the mean of the whole traffic. Movements of a leg
 * that share a turn with another are left out: the truth keeps them together.
 */
export function coverIntervals({ network, traversals, vehicles, input }: CoreRun): IntervalCoverage {
  const keys = {
    movement: network.movements.map((_, i) => i),
    leg: network.legs.map((_, i) => i),
    vehicle: vehicles.map((name) => Math.floor(hashUnit(name) * 4294967296)),
  };
  const days = buildScreenDays(traversals, legQuarters(network, traversals), keys, [{ fromMs: 0, offsetMin: 0 }]);
  const catalogue = {
    movements: network.movements.map(({ leg, turn }, key) => ({ key, leg, junction: network.legs[leg].junction, turn })),
    legs: network.legs.map(({ junction, storageM }, key) => ({ key, junction, storageM })),
  };
  const ready = days.map((day) => dayByJunction(day, indexCatalogue(catalogue)));
  const scores = scoreScreen(ready, catalogue, { fromQuarter: 0, toQuarter: 96, turn: null }, { rankDraws: 10 });
  const matched = matchLegs(groupRows(input.rows.filter((row) => row.intervalStart === "all")), input.truth);
  const coverage = { inside: 0, intervals: 0 };
  for (const [leg, found] of matched) {
    const ours = network.legs.findIndex(
      (candidate) => network.junctions[candidate.junction].id === leg.junctionId && candidate.bearingDeg === found.bearingDeg,
    );
    for (const truth of leg.movements) {
      const own = catalogue.movements.filter((movement) => movement.leg === ours && movement.turn === truth.turn);
      const score = own.length === 1 ? scores.movement(own[0].key) : undefined;
      if (!score || truth.exits.length > 1 || score.vehicles < LEAST_SHOWN) continue;
      const meanS = truth.figures.all.meanDelayS;
      coverage.intervals++;
      if (score.delay.low <= meanS && meanS <= score.delay.high) coverage.inside++;
    }
  }
  return coverage;
}
