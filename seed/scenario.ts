import { assignDemand, type Demand } from "./demand/assign";
import { PERIODS, type Period } from "./demand/pattern";
import { buildCity, type CityScale } from "./network/build-city";
import type { City } from "./network/types";
import { BLUR, nodeById, PLANTED } from "./planted";
import { saturationCaps } from "./demand/caps";
import { plantFaults } from "./signals/faults";
import { compilePlan, planSignals, type SignalPlan } from "./signals/plan";
import { buildLanes, type LaneMap } from "./simulation/lanes";

export const CITY_SEED = 1861;

/** All that is the same on every day: streets, lanes, demand, signal plans with the planted faults. */
export interface Scenario {
  scale: CityScale;
  city: City;
  map: LaneMap;
  demand: Demand;
  plans: Record<Period, SignalPlan>;
  /** How much worse than usual positions are at a place. */
  blurAt(x: number, y: number): number;
}

export function createScenario(scale: CityScale): Scenario {
  const city = buildCity(scale);
  const quiet = PLANTED[scale].filter((problem) => problem.kind === "noisy").map((problem) => nodeById(city, problem.junctionId));
  const demand = assignDemand(city, scale, PERIODS, CITY_SEED, saturationCaps(city, CITY_SEED), quiet);
  const planOf = (period: Period): SignalPlan => {
    const timings = planSignals(city, demand.flows[period]);
    plantFaults(city, timings, PLANTED[scale].filter((problem) => problem.period === period), demand.flows[period]);
    return compilePlan(city, timings);
  };
  const blurred = quiet.map((node) => city.nodes[node].point);
  const blurAt = (x: number, y: number) => (blurred.some((at) => Math.hypot(x - at[0], y - at[1]) < BLUR.withinM) ? BLUR.factor : 1);
  return { scale, city, blurAt, map: buildLanes(city), demand, plans: { am: planOf("am"), midday: planOf("midday"), pm: planOf("pm") } };
}
