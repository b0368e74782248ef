import { readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";

import { strayOffsets } from "../scenarios/grid";
import { createRandom } from "../random";
import type { DrawnStreets, Scenario } from "../scenarios/types";
import { runProgram } from "./programs";
import type { SimulatedNetwork } from "./read-network";
import { writeSignals } from "./write-network";

/** The scenario with the streets that the simulator's generator drew for it; one that names its own streets as it is. */
export function drawStreets(scenario: Scenario, folder: string): Scenario {
  const { generated } = scenario;
  if (!generated) return scenario;
  const prefix = join(folder, "drawn");
  runProgram("netgenerate", [
    ...generated.draw, "--seed", String(scenario.seed), "-o", `${prefix}.net.xml`, "--plain-output-prefix", prefix, "--no-warnings",
  ]);
  return { ...scenario, ...generated.dress(readPlain(prefix)) };
}

function readPlain(prefix: string): DrawnStreets {
  const tags = (kind: "nod" | "edg", tag: string) =>
    [...readFileSync(`${prefix}.${kind}.xml`, "utf8").matchAll(new RegExp(`<${tag} ([^>]*)>`, "g"))].map(([, head]) =>
      Object.fromEntries([...head.matchAll(/(\w+)="([^"]*)"/g)].map(([, name, value]) => [name, value])),
    );
  return {
    nodes: tags("nod", "node").map(({ id, x, y }) => ({ id, x: Number(x), y: Number(y) })),
    edges: tags("edg", "edge").map(({ id, from, to }) => ({ id, from, to })),
  };
}

/**
 * Has netconvert build the network anew around the scenario's own programs: who gives way at a turn on red follows from
 * them. Returns its path; that of a network which names its own streets stays.
 */
export function rebuildAround(scenario: Scenario, networkPath: string, folder: string): string {
  if (!scenario.generated) return networkPath;
  const programs = readFileSync(writeSignals(scenario, networkPath, folder, false), "utf8");
  const path = join(folder, "own.tll.xml");
  writeFileSync(path, programs.replaceAll('programID="reference"', 'programID="0"').replaceAll("additional>", "tlLogics>"));
  const rebuilt = join(folder, "rebuilt.net.xml");
  runProgram("netconvert", ["-s", networkPath, "--tllogic-files", path, "-o", rebuilt, "--xml-validation", "never", "--no-warnings"]);
  return rebuilt;
}

/** Once netconvert has chosen which crossings have a signal: those nodes, stray offsets, and where the near turn may be made at red. */
export function withGuessedSignals(scenario: Scenario, network: SimulatedNetwork): Scenario {
  const { generated } = scenario;
  if (!generated) return scenario;
  const nodes = scenario.nodes.map((node) => (network.signals.has(node.id) ? { ...node, kind: "signal" as const } : node));
  const random = createRandom(scenario.seed + 2);
  const offsets = strayOffsets(nodes, scenario.cycleS, scenario.seed + 1);
  const signals = Object.fromEntries(
    Object.entries(offsets).map(([id, signal]) => [id, { ...signal, turnOnRed: random.next() < generated.turnOnRedShare }]),
  );
  return { ...scenario, nodes, signals };
}
