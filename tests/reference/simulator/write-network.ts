import { readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";

import type { EdgeSpec, Scenario } from "../scenarios/types";
import { runProgram } from "./programs";

/** Writes the scenario's streets as plain XML and has netconvert build the network; returns its path. */
export function writeNetwork(scenario: Scenario, folder: string): string {
  const nodes = scenario.nodes.map(({ id, x, y, kind, controller }) => {
    const type = kind === "signal" ? "traffic_light" : kind === "end" ? "dead_end" : "priority";
    return `<node id="${id}" x="${x.toFixed(2)}" y="${y.toFixed(2)}" type="${type}"${controller ? ` tl="${controller}"` : ""}/>`;
  });
  const edges = scenario.edges.map((edge) => edgeXml(scenario, edge));
  const connections = (scenario.connections ?? []).map(
    (link) => `<connection from="${link.from}" to="${link.to}" fromLane="${link.fromLane}" toLane="${link.toLane}"/>`,
  );
  const files = {
    nodes: write(folder, "plain.nod.xml", "nodes", nodes),
    edges: write(folder, "plain.edg.xml", "edges", edges),
    connections: write(folder, "plain.con.xml", "connections", connections),
  };
  const network = join(folder, "net.xml");
  runProgram("netconvert", [
    "-n", files.nodes, "-e", files.edges, "-x", files.connections, "-o", network,
    "--offset.disable-normalization", "--no-turnarounds", String(!scenario.turnarounds),
    "--tls.cycle.time", String(scenario.cycleS), "--tls.left-green.time", String(scenario.leftGreenS),
    "--tls.yellow.time", "3", "--tls.allred.time", "1", "--tls.default-type", scenario.generated ? "actuated" : "static",
    "--junctions.corner-detail", "5", "--lefthand", String(scenario.driveSide === "left"), "--no-warnings",
    ...guesses(scenario),
  ]);
  return network;
}

/** What netconvert is to find for itself: which crossings have a signal, and where people walk. */
function guesses({ generated }: Scenario): string[] {
  if (!generated) return [];
  const footways = generated.walkersPerHour > 0 ? ["--sidewalks.guess", "true", "--crossings.guess", "true"] : [];
  return ["--tls.guess", "true", "--tls.guess.threshold", String(generated.signalFromMs), "--xml-validation", "never", ...footways];
}

function edgeXml(scenario: Scenario, edge: EdgeSpec): string {
  const ends = [edge.from, edge.to].map((id) => {
    const node = scenario.nodes.find((candidate) => candidate.id === id);
    if (!node) throw new RangeError(`Edge ${edge.id} of ${scenario.id} names the unknown node ${id}.`);
    return node;
  });
  const inner = edge.shape ?? [];
  const points = edge.ownEnds ? inner : [[ends[0].x, ends[0].y], ...inner, [ends[1].x, ends[1].y]];
  const shape = edge.shape ? ` shape="${points.map((point) => point.map((v) => v.toFixed(2)).join(",")).join(" ")}"` : "";
  return (
    `<edge id="${edge.id}" from="${edge.from}" to="${edge.to}" numLanes="${edge.lanes}"` +
    ` speed="${edge.speedMs}" priority="${edge.priority ?? 5}"${shape}/>`
  );
}

function write(folder: string, name: string, root: string, lines: string[]): string {
  const path = join(folder, name);
  writeFileSync(path, `<${root}>\n${lines.join("\n")}\n</${root}>\n`);
  return path;
}

/**
 * Copies the programs that netconvert chose, with the scenario's offsets and greens, or with
 * green for everybody (`allGreen`: what a vehicle needs when no signal delays it).
 */
export function writeSignals(scenario: Scenario, networkPath: string, folder: string, allGreen: boolean): string {
  const xml = readFileSync(networkPath, "utf8");
  const links = readSignalLinks(xml);
  const programs = [...xml.matchAll(/<tlLogic id="([^"]+)" type="(\w+)"[^>]*>([\s\S]*?)<\/tlLogic>/g)].map(([, id, type, body]) => {
    const phases = [...body.matchAll(/<phase duration="([^"]+)"\s+state="([^"]+)"([^>]*)\/>/g)];
    const signal = scenario.signals?.[id] ?? {};
    if (allGreen) return program(id, "static", 0, [`<phase duration="90" state="${"G".repeat(phases[0][2].length)}"/>`]);
    const lines = phases.map(([, duration, state, limits]) => {
      const stretched = (signal.greens ?? []).filter(({ from, dir }) => isProtected(links.get(id) ?? [], state, from, dir));
      const factor = stretched.reduce((product, green) => product * green.factor, 1);
      const shown = signal.turnOnRed ? withTurnOnRed(state, links.get(id) ?? [], scenario.driveSide === "right" ? "r" : "l") : state;
      return `<phase duration="${Math.max(3, Math.round(Number(duration) * factor))}" state="${shown}"${limits}/>`;
    });
    return program(id, type, signal.offsetS ?? 0, lines);
  });
  return write(folder, allGreen ? "green.add.xml" : "signals.add.xml", "additional", programs);
}

/** SUMO's "s": red, but who turns to the near side may go after a stop; not while people have green. */
function withTurnOnRed(state: string, links: SignalLink[], dir: string): string {
  const lamps = [...state];
  if (links.some((link) => link.from.startsWith(":") && /[Gg]/.test(lamps[link.index]))) return state;
  for (const link of links) if (link.dir === dir && lamps[link.index] === "r") lamps[link.index] = "s";
  return lamps.join("");
}

function program(id: string, type: string, offsetS: number, phases: string[]): string {
  return `<tlLogic id="${id}" type="${type}" programID="reference" offset="${offsetS}">${phases.join("")}</tlLogic>`;
}

interface SignalLink {
  from: string;
  dir: string;
  index: number;
}

function readSignalLinks(xml: string): Map<string, SignalLink[]> {
  const links = new Map<string, SignalLink[]>();
  for (const [, head] of xml.matchAll(/<connection ([^>]*)\/>/g)) {
    const found = /from="([^"]+)".* tl="([^"]+)" linkIndex="(\d+)" dir="(\w+)"/.exec(head);
    if (!found) continue;
    const [, from, signal, index, dir] = found;
    links.set(signal, [...(links.get(signal) ?? []), { from, dir: dir.toLowerCase(), index: Number(index) }]);
  }
  return links;
}

/** Protected means green without giving way ("G"), and no yellow anywhere. */
function isProtected(links: SignalLink[], state: string, from: string, dir: string): boolean {
  if (/y/.test(state)) return false;
  return links.some((link) => link.from === from && link.dir === dir && state[link.index] === "G");
}
