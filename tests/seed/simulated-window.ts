import { drawTrips } from "@seed/demand/trips";
import { createRandomStream } from "@seed/random";
import { CITY_SEED, type Scenario } from "@seed/scenario";
import { simulate } from "@seed/simulation/engine";
import { createTruth, type LaneState, type MovementTruth, type Trips } from "@seed/simulation/state";
import type { Passage, SimulationResult } from "@seed/simulation/traffic";

export interface FullRun {
  trips: Trips;
  result: SimulationResult;
  truth: MovementTruth;
}

/** Simulates a PM peak of the small city with every vehicle watched: from 16:00 local time, 15 minutes of warm-up, to 18:00. */
export function runPmPeak(scenario: Scenario, onPassage?: (trips: Trips, lanes: LaneState, passage: Passage) => void): FullRun {
  const endS = 7200;
  const trips = drawTrips(
    scenario.demand.rates.pm,
    { day: "weekday", period: "pm", zeroMin: 960, endS, dayFactor: 1, fleetShares: [1] },
    createRandomStream(CITY_SEED, 5),
  );
  const truth = createTruth(scenario.city, 900, endS, 900);
  const result = simulate({
    city: scenario.city, map: scenario.map, routes: scenario.demand.routes, plan: scenario.plans.pm, trips, endS, truth,
    isWatched: () => onPassage !== undefined,
    onPassage: (lanes, passage) => onPassage?.(trips, lanes, passage),
  });
  return { trips, result, truth };
}

/** Mean delay of the movements over the whole run, seconds; NaN where nobody passed. */
export function meanDelayS(truth: MovementTruth, movements: number[]): number {
  let vehicles = 0;
  let delayS = 0;
  for (const movement of movements) {
    for (let bin = movement * truth.bins; bin < (movement + 1) * truth.bins; bin++) {
      vehicles += truth.vehicles[bin];
      delayS += truth.delayS[bin];
    }
  }
  return delayS / vehicles;
}
