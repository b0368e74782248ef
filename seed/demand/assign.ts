import type { City } from "../network/types";
import { QUIET_SHARE } from "../planted";
import { createRandomStream, pickFromCumulative } from "../random";
import { timeNode } from "../signals/timing";
import { attraction, shortestTripM, type Period } from "./pattern";
import { findZones, movementsTo, routeTree, type Route, type Zone } from "./routes";
import type { CityScale } from "../network/build-city";

export interface Demand {
  zones: Zone[];
  routes: Route[];
  /** Vehicles per hour of each route at the height of the period. */
  rates: Record<Period, Float64Array>;
  /** Vehicles per hour of each movement at the height of the period. */
  flows: Record<Period, Float64Array>;
}

const VARIANTS = 3;
const SPREAD = 0.5;
const DESTINATIONS = { demo: 26, small: 34 } as const;
const CALIBRATION_STEPS = 14;
const CALIBRATION_CYCLE_S = 100;

/** Routes by the gravity model, thinned until no junction is asked for more than its share of capacity. */
export function assignDemand(city: City, scale: CityScale, periods: readonly Period[], seed: number, caps: Float64Array, quiet: number[]): Demand {
  const zones = findZones(city);
  const demand: Demand = {
    zones, routes: [],
    rates: { am: new Float64Array(0), midday: new Float64Array(0), pm: new Float64Array(0) },
    flows: { am: new Float64Array(0), midday: new Float64Array(0), pm: new Float64Array(0) },
  };
  const raw = drawRoutes(city, scale, zones, periods, seed, demand.routes);
  for (const period of periods) {
    const rates = Float64Array.from(raw[period]);
    calibrate(city, demand.routes, rates, caps);
    demand.routes.forEach((route, i) => {
      if (route.movements.some((movement) => quiet.includes(city.movements[movement].node))) rates[i] *= QUIET_SHARE;
    });
    demand.rates[period] = rates;
    demand.flows[period] = movementFlows(city, demand.routes, rates);
  }
  return demand;
}

function drawRoutes(city: City, scale: CityScale, zones: Zone[], periods: readonly Period[], seed: number, routes: Route[]): Record<Period, number[]> {
  const raw: Record<Period, number[]> = { am: [], midday: [], pm: [] };
  const random = createRandomStream(seed, 17);
  const shortestM = shortestTripM(scale);
  zones.forEach((zone, origin) => {
    if (zone.inLink < 0) return;
    const trees = Array.from({ length: VARIANTS }, (_, variant) => routeTree(city, zone.inLink, SPREAD * Math.sign(variant), seed + variant));
    const weights = Object.fromEntries(periods.map((period) => [period, zones.map((to) => attraction(period, zone, to, shortestM))]));
    const any = zones.map((_, to) => periods.reduce((sum, period) => sum + weights[period][to], 0));
    const cumulative = Float64Array.from(any);
    for (let i = 1; i < cumulative.length; i++) cumulative[i] += cumulative[i - 1];
    const drawn = new Set<number>();
    for (let draw = 0; draw < DESTINATIONS[scale] && cumulative[cumulative.length - 1] > 0; draw++) {
      const to = pickFromCumulative(cumulative, random.next());
      const variant = Math.floor(random.next() * VARIANTS);
      if (drawn.has(to * VARIANTS + variant)) continue;
      drawn.add(to * VARIANTS + variant);
      const movements = movementsTo(city, trees[variant], zone.inLink, zones[to].outLink);
      if (!movements) continue;
      routes.push({
        origin, destination: to, firstLink: zone.inLink, lastLink: zones[to].outLink,
        startsAtAccess: zone.isAccess, endsAtAccess: zones[to].isAccess, movements,
      });
      // Importance weight: the route stands for its share in each period.
      for (const period of PERIOD_KEYS) raw[period].push(periods.includes(period) ? weights[period][to] / any[to] * zoneTotal(weights[period]) : 0);
    }
  });
  return raw;
}

const PERIOD_KEYS: Period[] = ["am", "midday", "pm"];

function zoneTotal(weights: number[]): number {
  return weights.reduce((sum, weight) => sum + weight, 0);
}

export function movementFlows(city: City, routes: Route[], rates: Float64Array): Float64Array {
  const flow = new Float64Array(city.movements.length);
  routes.forEach((route, i) => route.movements.forEach((movement) => (flow[movement] += rates[i])));
  return flow;
}

/** Scales each route by the most loaded junction on its way, again and again. */
function calibrate(city: City, routes: Route[], rates: Float64Array, caps: Float64Array): void {
  const junctions = city.nodes.filter((node) => !node.isGate);
  const total = rates.reduce((sum, rate) => sum + rate, 0);
  const start = (junctions.length * 330) / total;
  rates.forEach((rate, i) => (rates[i] = rate * start));
  const factor = new Float64Array(city.nodes.length);
  for (let step = 0; step < CALIBRATION_STEPS; step++) {
    const flow = movementFlows(city, routes, rates);
    for (const node of junctions) {
      factor[node.index] = caps[node.index] / timeNode(city, node, flow, CALIBRATION_CYCLE_S).saturation;
    }
    routes.forEach((route, i) => {
      let worst = 1.25;
      for (const movement of route.movements) worst = Math.min(worst, factor[city.movements[movement].node]);
      rates[i] *= Math.sqrt(worst);
    });
  }
}
