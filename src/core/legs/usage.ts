import { angleBetweenDeg, signedTurnDeg } from "@/core/geometry/angles";
import { eastM, northM } from "@/core/geometry/plane";
import { arcLengths, projectNear } from "@/core/geometry/polyline";
import { OFFSET_BIN_M } from "@/core/legs/refine";
import type { StreetGraph } from "@/core/match/graph";
import type { Chain } from "@/core/match/chains";
import { matchTrips } from "@/core/match/match-trips";
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
  /** Trips whose path broke off behind an exit and began anew on a leg, over ground that no known way leads over: key exit * legs + leg. */
  broken: Map<number, number>;
  /** Moving speeds on each leg away from junctions, m/s. */
  speeds: number[][];
  /** Distance to the stop line at which each passage of a leg last stood, without those that wait inside the box to turn across. */
  heads: number[][];
  /** Headings of moving pings close before each leg's stop line, and close behind the beginning of each exit. */
  legHeadings: Headings;
  exitHeadings: Headings;
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

/** Sums of unit vectors, and how many. */
export interface Headings {
  count: Uint32Array;
  east: Float64Array;
  north: Float64Array;
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
const FACING_DEG = 30;
/** Stretch of a street, from the junction's box on, whose headings tell its bearing there, m. */
export const FACING = Object.freeze({ fromM: 4, binM: 4, bins: 24 });
const RAD = Math.PI / 180;
/** Pings from one stretch of a path to the next, at most, if they belong together. */
const BREAK_PINGS = 3;
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
    broken: new Map(),
    speeds: network.legs.map(() => []),
    heads: network.legs.map(() => []),
    legHeadings: createHeadings(network.legs.length),
    exitHeadings: createHeadings(network.exits.length),
    legOffsets: network.legs.map(offsets),
    exitOffsets: network.exits.map(offsets),
  };
  let before: Chain | null = null;
  matchTrips(trips, graph, (chain) => {
    if (before && before.trip === chain.trip) countBreak(before, chain, graph, usage);
    before = chain;
    countPassages(chain.links, graph, usage);
    countPings(chain, trips, graph, usage);
  });
  return usage;
}

function createHeadings(length: number): Headings {
  const size = length * FACING.bins;
  return { count: new Uint32Array(size), east: new Float64Array(size), north: new Float64Array(size) };
}

function addHeading(headings: Headings, item: number, outM: number, headingDeg: number, alongDeg: number): void {
  const bin = Math.floor((outM - FACING.fromM) / FACING.binM);
  if (!(bin >= 0 && bin < FACING.bins && angleBetweenDeg(headingDeg, alongDeg) < FACING_DEG)) return;
  const i = item * FACING.bins + bin;
  headings.count[i] += 1;
  headings.east[i] += Math.sin(headingDeg * RAD);
  headings.north[i] += Math.cos(headingDeg * RAD);
}

function countBreak(before: Chain, after: Chain, graph: StreetGraph, usage: Usage): void {
  const exit = graph.exit[before.links[before.links.length - 1]];
  const leg = graph.leg[after.links[0]];
  const isNext = after.pings[0] - before.pings[before.pings.length - 1] <= BREAK_PINGS;
  if (exit < 0 || leg < 0 || !isNext) return;
  const key = exit * graph.network.legs.length + leg;
  usage.broken.set(key, (usage.broken.get(key) ?? 0) + 1);
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
    const toLine = graph.stopAt[link] - chain.position[c];
    if (speed >= MOVING_MS) {
      addOffset(trips, i, chain, c, graph, usage);
      const exit = graph.exit[link];
      if (exit >= 0) addHeading(usage.exitHeadings, exit, chain.position[c], trips.headingDeg[i], graph.network.exits[exit].bearingDeg);
      if (leg >= 0) addHeading(usage.legHeadings, leg, toLine, trips.headingDeg[i], graph.network.legs[leg].bearingDeg);
    }
    if (leg < 0) continue;
    if (seenStep !== k && speed >= MOVING_MS && angleBetweenDeg(trips.headingDeg[i], graph.network.legs[leg].bearingDeg) < ALONG_DEG) {
      seenStep = k;
      usage.seenOn[leg] += 1;
    }
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
