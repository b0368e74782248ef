import { angleBetweenDeg, signedTurnDeg } from "@/core/geometry/angles";
import { eastM, northM } from "@/core/geometry/plane";
import { arcLengths, projectNear } from "@/core/geometry/polyline";
import { OFFSET_BIN_M } from "@/core/legs/refine";
import type { StreetGraph } from "@/core/match/graph";
import { matchTrips, type Chain } from "@/core/match/match-trips";
import type { Trips } from "@/core/pings/trips";

/** What matched traffic makes of a draft network. */
export interface Usage {
  /** Trips that left each leg through its junction. */
  leg: Uint32Array;
  /** Trips that came out of each exit. */
  exit: Uint32Array;
  /** Trips that drove from a leg's upstream exit onto the leg. */
  fed: Uint32Array;
  /** Trips with a moving ping on each leg's own street that points along it. */
  seenOn: Uint32Array;
  /** Trips by leg and exit: key leg * exits + exit. */
  movement: Map<number, number>;
  /** Moving speeds on each leg away from junctions, m/s. */
  speeds: number[][];
  /** Distance to the stop line at which each passage of a leg last stood, without those that wait inside the box to turn across. */
  heads: number[][];
  /** Sideways distances of moving pings from the line of each leg, and of each exit, by stretch of OFFSET_BIN_M. */
  legOffsets: LineOffsets[];
  exitOffsets: LineOffsets[];
}

export interface Offsets {
  count: Uint32Array;
  /** Sum of offsets to the right of the line's direction of drawing, m. */
  sum: Float64Array;
}

export interface LineOffsets extends Offsets {
  /** Arc lengths of the line's vertices. */
  arcs: Float64Array;
}

/** Nearest to a junction at which speeds count as free of it, and from the upstream end, m. */
const CLEAR_M = 60;
const CLEAR_OF_START_M = 30;
const MOST_SPEEDS = 4000;
const STANDING_MS = 1;
const MOVING_MS = 3;
const ACROSS_DEG = 45;
const HEAD_PAST_LINE_M = 12;
const ALONG_DEG = 40;
/** The place on a line beside a ping lies this near to its matched place, m. */
const OFFSET_REACH_M = 25;

/** Matches all trips and counts. O(pings). */
export function measureUsage(trips: Trips, graph: StreetGraph): Usage {
  const { network } = graph;
  const offsets = ({ line, lengthM }: { line: Float64Array; lengthM: number }): LineOffsets => {
    const bins = Math.ceil(lengthM / OFFSET_BIN_M) + 1;
    return { arcs: arcLengths(line), count: new Uint32Array(bins), sum: new Float64Array(bins) };
  };
  const usage: Usage = {
    leg: new Uint32Array(network.legs.length),
    exit: new Uint32Array(network.exits.length),
    fed: new Uint32Array(network.legs.length),
    seenOn: new Uint32Array(network.legs.length),
    movement: new Map(),
    speeds: network.legs.map(() => []),
    heads: network.legs.map(() => []),
    legOffsets: network.legs.map(offsets),
    exitOffsets: network.exits.map(offsets),
  };
  matchTrips(trips, graph, (chain) => {
    countPassages(chain.links, graph, usage);
    countPings(chain, trips, graph, usage);
  });
  return usage;
}

function countPassages(links: number[], graph: StreetGraph, usage: Usage): void {
  for (let k = 0; k + 1 < links.length; k++) {
    const leg = graph.leg[links[k]];
    const exit = graph.exit[links[k + 1]];
    usage.leg[leg] += 1;
    usage.exit[exit] += 1;
    const next = graph.leg[links[k + 1]];
    if (next >= 0) usage.fed[next] += 1;
    const key = leg * graph.network.exits.length + exit;
    usage.movement.set(key, (usage.movement.get(key) ?? 0) + 1);
  }
}

function countPings(chain: Chain, trips: Trips, graph: StreetGraph, usage: Usage): void {
  let head = NaN;
  let seenStep = -1;
  for (let c = 0; c < chain.pings.length; c++) {
    const k = chain.step[c];
    if (c > 0 && chain.step[c - 1] !== k) {
      keepHead(chain, chain.step[c - 1], head, graph, usage);
      head = NaN;
    }
    const link = chain.links[k];
    const leg = graph.leg[link];
    const i = chain.pings[c];
    const speed = trips.speedMs[i];
    if (speed >= MOVING_MS) addOffset(trips, i, chain, c, graph, usage);
    if (leg < 0) continue;
    if (seenStep !== k && speed >= MOVING_MS && angleBetweenDeg(trips.headingDeg[i], graph.network.legs[leg].bearingDeg) < ALONG_DEG) {
      seenStep = k;
      usage.seenOn[leg] += 1;
    }
    const toLine = graph.stopAt[link] - chain.position[c];
    if (speed < STANDING_MS) head = toLine;
    const isClear = toLine > CLEAR_M && chain.position[c] > CLEAR_OF_START_M;
    if (isClear && speed > MOVING_MS && usage.speeds[leg].length < MOST_SPEEDS) usage.speeds[leg].push(speed);
  }
}

function keepHead(chain: Chain, step: number, head: number, graph: StreetGraph, usage: Usage): void {
  const { legs, exits, driveSide } = graph.network;
  const leg = graph.leg[chain.links[step]];
  if (leg < 0 || step + 1 >= chain.links.length || !(head >= -HEAD_PAST_LINE_M)) return;
  const turn = signedTurnDeg(legs[leg].bearingDeg, exits[graph.exit[chain.links[step + 1]]].bearingDeg);
  const isAcross = driveSide === "right" ? turn < -ACROSS_DEG : turn > ACROSS_DEG;
  if (!isAcross) usage.heads[leg].push(head);
}

function addOffset(trips: Trips, i: number, chain: Chain, c: number, graph: StreetGraph, usage: Usage): void {
  const { legs, exits } = graph.network;
  const link = chain.links[chain.step[c]];
  const leg = graph.leg[link];
  const plane = graph.planes[graph.home[link]];
  const { line, lengthM } = leg >= 0 ? legs[leg] : exits[graph.exit[link]];
  const offsets = leg >= 0 ? usage.legOffsets[leg] : usage.exitOffsets[graph.exit[link]];
  // A leg is drawn from its stop line upstream, its link in the direction of travel.
  const near = leg >= 0 ? graph.stopAt[link] - chain.position[c] : chain.position[c];
  const { at, offset } = projectNear(line, offsets.arcs, eastM(plane, trips.lon[i]), northM(plane, trips.lat[i]), near, OFFSET_REACH_M);
  if (at <= 0 || at >= lengthM) return;
  const bin = Math.floor(at / OFFSET_BIN_M);
  offsets.count[bin] += 1;
  offsets.sum[bin] += offset;
}
