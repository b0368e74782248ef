import { join } from "node:path";

import type { Scenario } from "../scenarios/types";
import { runProgram } from "./programs";
import { readTrajectories } from "./read-trajectories";
import type { Course } from "./read-trajectories";
import { writeSignals } from "./write-network";
import { writeTrips } from "./write-trips";

/** Runs the scenario's traffic and returns every vehicle's course, one position a second. */
export async function simulate(scenario: Scenario, network: string, folder: string): Promise<Map<string, Course>> {
  const output = join(folder, "fcd.xml");
  const routes = join(folder, "routes.xml");
  // Trips that no street allows (to the other side without a turnaround) are left out here.
  runProgram("duarouter", [
    "-n", network, "-r", writeTrips(scenario, folder), "-o", routes, "--ignore-errors", "--no-warnings", "--no-step-log",
    "--weights.random-factor", String(scenario.routeSpread), "--seed", String(scenario.seed), "--xml-validation", "never",
  ]);
  runSimulator(network, routes, writeSignals(scenario, network, folder, false), output, [
    "--begin", "0", "--end", String(scenario.warmUpS + scenario.recordedS),
    "--device.fcd.begin", String(scenario.warmUpS),
    "--seed", String(scenario.seed),
    "--time-to-teleport", "240",
  ]);
  return readTrajectories(output, scenario.warmUpS);
}

export function runSimulator(network: string, routes: string, additional: string, output: string, options: string[]) {
  runProgram("sumo", [
    "-n", network, "-r", routes, "-a", additional, "--fcd-output", output,
    "--step-length", "0.5", "--device.fcd.period", "1",
    "--no-step-log", "--no-warnings", "--xml-validation", "never", ...options,
  ]);
}
