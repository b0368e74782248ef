import { writeFileSync } from "node:fs";
import { join } from "node:path";

import type { Scenario } from "../scenarios/types";
import type { SimulatedNetwork } from "../simulator/read-network";
import { readTrajectories } from "../simulator/read-trajectories";
import { runSimulator } from "../simulator/simulate";
import { writeSignals } from "../simulator/write-network";
import { loneVehicleType } from "../simulator/write-trips";
import { findPassages } from "./passages";
import type { LegIndex, RawPassage } from "./passages";

/** Commonest ways into and out of a movement that are driven alone for its reference. */
const CONTEXTS = 4;
/** Long enough for one vehicle to leave before the next starts. */
const HEADWAY_S = 150;

export const movementKey = (passage: RawPassage) => `${passage.leg.chain[0].id}>${passage.exit.edge.id}`;

/**
 * Undelayed time of each movement, seconds from cordon to exit cordon, by `movementKey`: one vehicle at
 * a time drives it at the speed limit with all signals green, coming from and going to where the
 * traffic does; averaged with the traffic's weights.
 */
export async function findReferenceTimes(
  scenario: Scenario, networkPath: string, network: SimulatedNetwork, folder: string, passages: RawPassage[], index: LegIndex,
): Promise<Map<string, number>> {
  const runs = commonContexts(passages, network);
  const routes = runs.map(({ context }, i) => {
    const type = 'type="lone" departLane="best" departPos="base" departSpeed="max" arrivalPos="max"';
    return `<vehicle id="${i}" depart="${i * HEADWAY_S}" ${type}><route edges="${context.join(" ")}"/></vehicle>`;
  });
  const path = join(folder, "lone.rou.xml");
  writeFileSync(path, `<routes>\n${loneVehicleType(scenario)}\n${routes.join("\n")}\n</routes>\n`);
  const output = join(folder, "lone.fcd.xml");
  runSimulator(networkPath, [path], [writeSignals(scenario, networkPath, folder, true)], output, []);
  const courses = await readTrajectories(output, 0);
  const sums = new Map<string, { time: number; weight: number }>();
  for (const course of courses.values()) {
    const run = runs[Number(course.id)];
    const passage = findPassages(course, index).find((candidate) => candidate.isComplete && movementKey(candidate) === run.movement);
    if (!passage) continue;
    const sum = sums.get(run.movement) ?? { time: 0, weight: 0 };
    sum.time += (passage.exitS - passage.enterS) * run.weight;
    sum.weight += run.weight;
    sums.set(run.movement, sum);
  }
  return new Map([...sums].map(([movement, { time, weight }]) => [movement, time / weight]));
}

function commonContexts(passages: RawPassage[], network: SimulatedNetwork): { movement: string; context: string[]; weight: number }[] {
  const counts = new Map<string, Map<string, number>>();
  const isDrivable = (context: string[]) => context.every((edge, i) => i === 0 || network.connections.has(`${context[i - 1]}>${edge}`));
  for (const passage of passages) {
    if (!passage.isComplete || !isDrivable(passage.context)) continue;
    const movement = movementKey(passage);
    const contexts = counts.get(movement) ?? new Map<string, number>();
    const key = passage.context.join(" ");
    contexts.set(key, (contexts.get(key) ?? 0) + 1);
    counts.set(movement, contexts);
  }
  return [...counts].flatMap(([movement, contexts]) =>
    [...contexts]
      .sort((a, b) => b[1] - a[1])
      .slice(0, CONTEXTS)
      .map(([key, weight]) => ({ movement, context: key.split(" "), weight })),
  );
}
