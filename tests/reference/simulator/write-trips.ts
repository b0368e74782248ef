import { writeFileSync } from "node:fs";
import { join } from "node:path";

import { createRandom } from "../random";
import type { Random } from "../random";
import type { BusLine, Demand, Scenario } from "../scenarios/types";
import type { SimulatedNetwork } from "./read-network";

const VEHICLES = {
  // Moderate drivers; rates near those seen at urban signals.
  calm: [
    'accel="1.9" decel="2.8" emergencyDecel="6" sigma="0.4" tau="1.3" minGap="2.3" length="4.7" speedFactor="normc(1.0,0.08,0.75,1.25)"',
    'accel="1.2" decel="2.4" emergencyDecel="6" sigma="0.4" tau="1.5" minGap="2.6" length="9.5" speedFactor="normc(0.94,0.06,0.75,1.05)" guiShape="truck"',
  ],
  // The simulator's own passenger car.
  default: [
    'accel="2.6" decel="4.5" sigma="0.5" tau="1.0" minGap="2.5" length="5.0" speedFactor="normc(1.0,0.1,0.2,2)"',
    'accel="1.3" decel="4.0" sigma="0.5" tau="1.0" minGap="2.5" length="7.1" speedFactor="normc(1.0,0.05,0.2,2)" guiShape="truck"',
  ],
};
const HEAVY_SHARE = 0.05;
const BUS = '<vType id="bus" accel="1.2" decel="2.6" emergencyDecel="6" sigma="0.4" tau="1.4" minGap="2.5" length="12" speedFactor="normc(0.9,0.05,0.75,1.0)"/>';
/** Seconds that a bus dwells, and that an errand takes beside the lane or in it. */
const BUS_DWELL_S = [12, 30];
const PARKED_S = [40, 200];
const IN_LANE_S = [20, 60];
/** Road that an errand's vehicle needs at each end of a street, metres. */
const CLEAR_M = 35;

interface TripStop {
  edge: string;
  /** Metres from the edge's beginning. */
  atM: number;
  durationS: number;
  inLane: boolean;
}

interface Trip {
  type: "car" | "heavy" | "bus";
  stops: TripStop[];
  departS: number;
  from: string;
  to: string;
  startsInside: boolean;
  endsInside: boolean;
}

const isBetween = (random: Random, [least, most]: number[]) => least + (most - least) * random.next();

/** Draws every trip of the scenario (Poisson departures) and writes them in order of departure; returns the path. */
export function writeTrips(scenario: Scenario, network: SimulatedNetwork, folder: string): string {
  const random = createRandom(scenario.seed);
  const trips: Trip[] = [];
  for (const demand of scenario.demand) drawTrips(scenario, demand, random, trips);
  for (const { from, to, perHour } of scenario.relations ?? []) {
    forEachDeparture(scenario, perHour, random, (departS) =>
      trips.push({ departS, from, to, startsInside: false, endsInside: false, type: typeOf(random), stops: [] }),
    );
  }
  if (scenario.generated) sendOnErrands(scenario, network, trips);
  for (const line of scenario.buses ?? []) addBuses(scenario, line, network, random, trips);
  trips.sort((a, b) => a.departS - b.departS);
  const path = join(folder, "trips.xml");
  const lines = trips.map((trip, i) => tripXml(trip, i, network));
  writeFileSync(path, `<routes>\n${vehicleTypes(scenario)}\n${lines.join("\n")}\n</routes>\n`);
  return path;
}

const typeOf = (random: Random) => (random.next() < HEAVY_SHARE ? "heavy" : "car");

/** Some of the trips stop on the way: beside the lane, or in it where others can pass. */
function sendOnErrands(scenario: Scenario, network: SimulatedNetwork, trips: Trip[]) {
  const random = createRandom(scenario.seed + 3);
  const places = scenario.demand.flatMap(({ inner }) => inner).filter((id) => (network.edges.get(id)?.lengthM ?? 0) > 3 * CLEAR_M);
  for (const trip of trips) {
    if (random.next() >= (scenario.generated?.errandShare ?? 0)) continue;
    const edge = places[Math.floor(random.next() * places.length)];
    if (edge === trip.from || edge === trip.to) continue;
    const lengthM = network.edges.get(edge)?.lengthM ?? 0;
    const inLane = random.next() < 0.4 && (scenario.edges.find(({ id }) => id === edge)?.lanes ?? 1) > 1;
    trip.stops.push({ edge, atM: isBetween(random, [CLEAR_M, lengthM - CLEAR_M]), durationS: isBetween(random, inLane ? IN_LANE_S : PARKED_S), inLane });
  }
}

function addBuses(scenario: Scenario, line: BusLine, network: SimulatedNetwork, random: Random, trips: Trip[]) {
  for (let departS = random.next() * line.everyS; departS < scenario.warmUpS + scenario.recordedS; departS += line.everyS) {
    const stops = line.stops.map(({ edge, beforeEndM }) => ({
      edge, atM: (network.edges.get(edge)?.lengthM ?? 0) - beforeEndM, durationS: isBetween(random, BUS_DWELL_S), inLane: true,
    }));
    trips.push({ departS, from: line.from, to: line.to, startsInside: false, endsInside: false, type: "bus", stops });
  }
}

/** People who cross the arms of each signal; the simulator finds their ways. */
export function writeWalkers(scenario: Scenario, network: SimulatedNetwork, folder: string): string {
  const perHour = scenario.generated?.walkersPerHour ?? 0;
  const flows = [...network.signals].flatMap((id, n) => {
    const walked = (network.incoming.get(id) ?? []).filter((edge) => edge.lanes[0].forWalkers);
    return walked.map(
      (edge, k) =>
        `<personFlow id="w${n}-${k}" begin="0" end="${scenario.warmUpS + scenario.recordedS}" perHour="${(perHour / walked.length).toFixed(1)}">` +
        `<walk from="${edge.id}" to="${walked[(k + 1) % walked.length].id}"/></personFlow>`,
    );
  });
  const path = join(folder, "walkers.xml");
  writeFileSync(path, `<routes>\n${flows.join("\n")}\n</routes>\n`);
  return path;
}

export function vehicleTypes(scenario: Scenario): string {
  const own = VEHICLES[scenario.vehicles].map((attributes, i) => `<vType id="${i ? "heavy" : "car"}" ${attributes}/>`);
  return [...own, ...(scenario.buses ? [BUS] : [])].join("\n");
}

/** A car that drives at exactly the limit, for the reference runs. */
export function loneVehicleType(scenario: Scenario): string {
  const car = VEHICLES[scenario.vehicles][0].replace(/sigma="[^"]*"/, 'sigma="0"').replace(/speedFactor="[^"]*"/, 'speedFactor="1" speedDev="0"');
  return `<vType id="lone" ${car}/>`;
}

function drawTrips(scenario: Scenario, demand: Demand, random: Random, trips: Trip[]) {
  const { inner } = demand;
  for (const [entry, perHour] of Object.entries(demand.entries)) {
    forEachDeparture(scenario, perHour, random, (departS) => {
      const startsInside = random.next() < scenario.innerShare && inner.length > 0;
      const endsInside = random.next() < scenario.innerShare && inner.length > 0;
      const from = startsInside ? inner[Math.floor(random.next() * inner.length)] : entry;
      const to = endsInside ? inner[Math.floor(random.next() * inner.length)] : pickExit(scenario, demand, entry, random);
      if (from !== to) trips.push({ departS, from, to, startsInside, endsInside, type: typeOf(random), stops: [] });
    });
  }
}

function forEachDeparture(scenario: Scenario, perHour: number, random: Random, visit: (departS: number) => void) {
  const endS = scenario.warmUpS + scenario.recordedS;
  let departS = 0;
  while (true) {
    const third = Math.min(2, Math.max(0, Math.floor(((departS - scenario.warmUpS) / scenario.recordedS) * 3)));
    departS += -Math.log(1 - random.next()) / ((perHour * scenario.profile[third]) / 3600);
    if (!(departS < endS)) return;
    visit(departS);
  }
}

function pickExit(scenario: Scenario, demand: Demand, from: string, random: Random): string {
  const entry = scenario.edges.find((edge) => edge.id === from);
  const options = Object.entries(demand.exits).filter(([id]) => scenario.edges.find((edge) => edge.id === id)?.to !== entry?.from);
  let left = random.next() * options.reduce((sum, [, weight]) => sum + weight, 0);
  for (const [id, weight] of options) {
    left -= weight;
    if (left <= 0) return id;
  }
  return options[options.length - 1][0];
}

function tripXml(trip: Trip, index: number, network: SimulatedNetwork): string {
  const depart = trip.startsInside ? 'departPos="random" departSpeed="0"' : 'departPos="base" departSpeed="max"';
  const arrive = trip.endsInside ? 'arrivalPos="random"' : 'arrivalPos="max"';
  const head =
    `<trip id="v${index}" type="${trip.type}" depart="${trip.departS.toFixed(1)}" from="${trip.from}" to="${trip.to}"` +
    ` departLane="best" ${depart} ${arrive}`;
  return trip.stops.length === 0 ? `${head}/>` : `${head}>${trip.stops.map((stop) => stopXml(stop, network)).join("")}</trip>`;
}

function stopXml({ edge, atM, durationS, inLane }: TripStop, network: SimulatedNetwork): string {
  const lane = network.edges.get(edge)?.lanes[0].forWalkers ? 1 : 0;
  return (
    `<stop lane="${edge}_${lane}" startPos="${Math.max(0, atM - 15).toFixed(1)}" endPos="${atM.toFixed(1)}" friendlyPos="true"` +
    ` duration="${durationS.toFixed(0)}" parking="${String(!inLane)}"/>`
  );
}
