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
  runSimulator(network, writeTrips(scenario, folder), writeSignals(scenario, network, folder, false), output, [
    "--begin", "0", "--end", String(scenario.warmUpS + scenario.recordedS),
    "--device.fcd.begin", String(scenario.warmUpS),
    "--seed", String(scenario.seed),
    "--weights.random-factor", String(scenario.routeSpread),
    "--time-to-teleport", "240",
  ]);
  return readTrajectories(output, scenario.warmUpS);
}

export function runSimulator(network: string, routes: string, additional: string, output: string, options: string[]) {
  runProgram("sumo", [
    "-n", network, "-r", routes, "-a", additional, "--fcd-output", output,
    "--step-length", "0.5", "--device.fcd.period", "1", "--lanechange.duration", "2",
    "--no-step-log", "--no-warnings", "--xml-validation", "never", ...options,
  ]);
}
