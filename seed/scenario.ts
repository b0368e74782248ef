import { assignDemand, type Demand } from "./demand/assign";
import { PERIODS, type Period } from "./demand/pattern";
import { buildCity, type CityScale } from "./network/build-city";
import type { City } from "./network/types";
import { demandCaps, spoilTimings } from "./planted";
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
}

export function createScenario(scale: CityScale): Scenario {
  const city = buildCity(scale);
  const demand = assignDemand(city, scale, PERIODS, CITY_SEED, (period) => demandCaps(city, scale, period, CITY_SEED));
  const planOf = (period: Period): SignalPlan => {
    const timings = planSignals(city, demand.flows[period]);
    spoilTimings(city, scale, period, timings, demand.flows[period]);
    return compilePlan(city, timings);
  };
  return { scale, city, map: buildLanes(city), demand, plans: { am: planOf("am"), midday: planOf("midday"), pm: planOf("pm") } };
}
