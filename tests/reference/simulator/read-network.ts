import { readFileSync } from "node:fs";

export interface LaneGeometry {
  lengthM: number;
  speedMs: number;
  /** A footway, on which nobody drives. */
  forWalkers: boolean;
  /** x then y of each vertex. */
  shape: number[];
}

export interface StreetEdge {
  id: string;
  from: string;
  to: string;
  lanes: LaneGeometry[];
  lengthM: number;
}

export interface SimulatedNetwork {
  edges: Map<string, StreetEdge>;
  /** Junction box of internal edges by their id. */
  incoming: Map<string, StreetEdge[]>;
  outgoing: Map<string, StreetEdge[]>;
  signals: Set<string>;
  /** Pairs "edge>edge" that vehicles may drive. */
  connections: Set<string>;
}

/** Reads what the truth needs from the simulator's network file. */
export function readNetwork(path: string): SimulatedNetwork {
  const xml = readFileSync(path, "utf8");
  const network: SimulatedNetwork = {
    edges: new Map(), incoming: new Map(), outgoing: new Map(), signals: new Set(), connections: new Set(),
  };
  for (const [, head, body] of xml.matchAll(/<edge ([^>]*[^/])>([\s\S]*?)<\/edge>/g)) {
    const id = attribute(head, "id");
    if (id.startsWith(":")) continue;
    const lanes = [...body.matchAll(/<lane ([^>]*?)\/?>/g)].map(([, lane]) => ({
      lengthM: Number(attribute(lane, "length")),
      speedMs: Number(attribute(lane, "speed")),
      forWalkers: attribute(lane, "allow") === "pedestrian",
      shape: attribute(lane, "shape").split(/[ ,]/).map(Number),
    }));
    const edge = { id, from: attribute(head, "from"), to: attribute(head, "to"), lanes, lengthM: lanes[0].lengthM };
    network.edges.set(id, edge);
    append(network.incoming, edge.to, edge);
    append(network.outgoing, edge.from, edge);
  }
  for (const [, head] of xml.matchAll(/<junction ([^>]*)>/g)) {
    if (attribute(head, "type").startsWith("traffic_light")) network.signals.add(attribute(head, "id"));
  }
  for (const [, head] of xml.matchAll(/<connection ([^>]*)\/>/g)) {
    network.connections.add(`${attribute(head, "from")}>${attribute(head, "to")}`);
  }
  return network;
}

function attribute(head: string, name: string): string {
  return new RegExp(`(?:^|\\s)${name}="([^"]*)"`).exec(head)?.[1] ?? "";
}

function append(map: Map<string, StreetEdge[]>, key: string, edge: StreetEdge) {
  const list = map.get(key);
  if (list) list.push(edge);
  else map.set(key, [edge]);
}
