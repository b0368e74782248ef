import type { CityEdge, CityNode } from "./types";

interface CorridorPlan {
  name: string;
  streets: string[];
  /** Keeps only the part of a street north or south of this line. */
  northOfM?: number;
  southOfM?: number;
}

const SHORTEST_CORRIDOR = 4;

/** Where two corridors cross, the earlier one in this list has the junction. */
const CORRIDORS: CorridorPlan[] = [
  { name: "Ring Road North", streets: ["Ring Road"], northOfM: -500 },
  { name: "Ring Road South", streets: ["Ring Road"], southOfM: -500 },
  { name: "Harbour Road", streets: ["Harbour Road"] },
  { name: "Bridge Street", streets: ["Bridge Street"] },
  { name: "Lighthouse Avenue", streets: ["Lighthouse Avenue"] },
  { name: "Shipwright Road", streets: ["Shipwright Road"] },
  { name: "Ferry Road", streets: ["Ferry Road", "Southmoor Road"] },
  { name: "Mill Lane", streets: ["Mill Lane"] },
  { name: "Custom House Lane", streets: ["Custom House Lane"] },
  { name: "High Street", streets: ["High Street"] },
  { name: "Market Street and North Road", streets: ["Market Street", "North Road"] },
  { name: "Coast Road", streets: ["Coast Road"] },
  { name: "Beacon Road", streets: ["Beacon Road"] },
  { name: "Westmoor Road", streets: ["Westmoor Road"] },
  { name: "Lantern Road", streets: ["Lantern Road"] },
  { name: "Foundry Road", streets: ["Foundry Road"] },
  { name: "Kelp Road", streets: ["Kelp Road"] },
  { name: "Tidewater Road", streets: ["Tidewater Road"] },
  { name: "Skerry Road", streets: ["Skerry Road"] },
  { name: "Quay Street and the Strand", streets: ["Strand West", "Quay Street", "Strand East"] },
  { name: "Inner Circle North", streets: ["Inner Circle North"] },
  { name: "Inner Circle South", streets: ["Inner Circle South"] },
  { name: "Sailmaker Avenue", streets: ["Sailmaker Avenue"] },
  { name: "Limpet Lane", streets: ["Limpet Lane"] },
];

/** Gives each junction at most one corridor and its place along it. */
export function assignCorridors(nodes: CityNode[], edges: CityEdge[]): void {
  for (const plan of CORRIDORS) {
    const chain = plan.streets.flatMap((street) => chainOf(nodes, edges, street, plan));
    const own = [...new Set(chain)].filter((node) => nodes[node].corridor === "");
    if (own.length < SHORTEST_CORRIDOR) continue;
    own.forEach((node, i) => {
      nodes[node].corridor = plan.name;
      nodes[node].corridorOrder = i + 1;
    });
  }
}

/** The junctions of a street from one end to the other. */
function chainOf(nodes: CityNode[], edges: CityEdge[], street: string, plan: CorridorPlan): number[] {
  const isIn = (node: number) => {
    const y = nodes[node].point[1];
    return y >= (plan.northOfM ?? -Infinity) && y < (plan.southOfM ?? Infinity);
  };
  const own = edges.filter((edge) => edge.street === street && isIn(edge.from) && isIn(edge.to));
  const next = new Map<number, number[]>();
  for (const edge of own) {
    next.set(edge.from, [...(next.get(edge.from) ?? []), edge.to]);
    next.set(edge.to, [...(next.get(edge.to) ?? []), edge.from]);
  }
  const chain: number[] = [];
  let at = [...next.keys()].find((node) => next.get(node)?.length === 1);
  while (at !== undefined) {
    chain.push(at);
    at = next.get(at)?.find((node) => !chain.includes(node));
  }
  return chain.filter((node) => !nodes[node].isGate);
}
