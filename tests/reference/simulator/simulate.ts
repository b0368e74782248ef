import { join } from "node:path";

import type { Scenario } from "../scenarios/types";
import { runProgram } from "./programs";
import type { SimulatedNetwork } from "./read-network";
import { readDwells, readTrajectories } from "./read-trajectories";
import type { Course } from "./read-trajectories";
import { writeSignals } from "./write-network";
import { writeTrips, writeWalkers } from "./write-trips";

/** Runs the scenario's traffic and returns every vehicle's course, one position a second. */
export async function simulate(scenario: Scenario, networkPath: string, network: SimulatedNetwork, folder: string): Promise<Map<string, Course>> {
  const output = join(folder, "fcd.xml");
  const routes = join(folder, "routes.xml");
  // Trips that no street allows (to the other side without a turnaround) are left out here.
  runProgram("duarouter", [
    "-n", networkPath, "-r", writeTrips(scenario, network, folder), "-o", routes, "--ignore-errors", "--no-warnings", "--no-step-log",
    "--weights.random-factor", String(scenario.routeSpread), "--seed", String(scenario.seed), "--xml-validation", "never",
  ]);
  const walkers = scenario.generated ? [writeWalkers(scenario, network, folder)] : [];
  const stops = join(folder, "stops.xml");
  const signals = scenario.generated ? [] : [writeSignals(scenario, networkPath, folder, false)];
  runSimulator(networkPath, [routes, ...walkers], signals, output, [
    "--begin", "0", "--end", String(scenario.warmUpS + scenario.recordedS),
    "--device.fcd.begin", String(scenario.warmUpS),
    "--seed", String(scenario.seed),
    "--time-to-teleport", "240", "--stop-output", stops,
  ]);
  const courses = await readTrajectories(output, scenario.warmUpS);
  readDwells(stops, scenario.warmUpS, courses);
  return courses;
}

/** `additional` are signal programs in place of the network's own. */
export function runSimulator(network: string, routes: string[], additional: string[], output: string, options: string[]) {
  runProgram("sumo", [
    "-n", network, "-r", routes.join(","), ...additional.flatMap((path) => ["-a", path]), "--fcd-output", output,
    "--step-length", "0.5", "--device.fcd.period", "1",
    "--no-step-log", "--no-warnings", "--xml-validation", "never", ...options,
  ]);
}
