import { writeFileSync } from "node:fs";
import { join } from "node:path";

import { createRandom } from "../random";
import type { Random } from "../random";
import type { Demand, Scenario } from "../scenarios/types";

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

interface Trip {
  departS: number;
  from: string;
  to: string;
  startsInside: boolean;
  endsInside: boolean;
  heavy: boolean;
}

/** Draws every trip of the scenario (Poisson departures) and writes them in order of departure; returns the path. */
export function writeTrips(scenario: Scenario, folder: string): string {
  const random = createRandom(scenario.seed);
  const trips: Trip[] = [];
  for (const demand of scenario.demand) drawTrips(scenario, demand, random, trips);
  for (const { from, to, perHour } of scenario.relations ?? []) {
    forEachDeparture(scenario, perHour, random, (departS) =>
      trips.push({ departS, from, to, startsInside: false, endsInside: false, heavy: random.next() < HEAVY_SHARE }),
    );
  }
  trips.sort((a, b) => a.departS - b.departS);
  const path = join(folder, "trips.xml");
  writeFileSync(path, `<routes>\n${vehicleTypes(scenario)}\n${trips.map(tripXml).join("\n")}\n</routes>\n`);
  return path;
}

export function vehicleTypes(scenario: Scenario): string {
  return VEHICLES[scenario.vehicles].map((attributes, i) => `<vType id="${i ? "heavy" : "car"}" ${attributes}/>`).join("\n");
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
      if (from !== to) trips.push({ departS, from, to, startsInside, endsInside, heavy: random.next() < HEAVY_SHARE });
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

function tripXml(trip: Trip, index: number): string {
  const depart = trip.startsInside ? 'departPos="random" departSpeed="0"' : 'departPos="base" departSpeed="max"';
  const arrive = trip.endsInside ? 'arrivalPos="random"' : 'arrivalPos="max"';
  return (
    `<trip id="v${index}" type="${trip.heavy ? "heavy" : "car"}" depart="${trip.departS.toFixed(1)}" from="${trip.from}" to="${trip.to}"` +
    ` departLane="best" ${depart} ${arrive}/>`
  );
}
