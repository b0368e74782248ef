import { markLanes } from "./connections";
import type { ConnectionSpec, Scenario } from "./types";

/** The same town seen in a mirror: east becomes west and traffic keeps to the other side. */
export function mirrorScenario(scenario: Scenario, id: string, title: string, bays: ConnectionSpec[] = []): Scenario {
  const driveSide = scenario.driveSide === "right" ? "left" : "right";
  const nodes = scenario.nodes.map((node) => ({ ...node, x: -node.x }));
  const edges = scenario.edges.map((edge) => ({
    ...edge,
    shape: edge.shape?.map(([x, y]): [number, number] => [-x, y]),
  }));
  const signals = Object.fromEntries(
    Object.entries(scenario.signals ?? {}).map(([node, signal]) => [
      node,
      { ...signal, greens: signal.greens?.map((green) => ({ ...green, dir: MIRRORED[green.dir] })) },
    ]),
  );
  return { ...scenario, id, title, driveSide, nodes, edges, signals, connections: [...bays, ...markLanes(nodes, edges, driveSide)] };
}

const MIRRORED = { l: "r", s: "s", r: "l" } as const;
