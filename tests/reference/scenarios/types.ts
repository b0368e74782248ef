import type { DriveSide } from "@/core/types";

export interface NodeSpec {
  id: string;
  /** Metres east and north of the scenario's origin. */
  x: number;
  y: number;
  /** Only signals become junctions of the city's list; the rest are bends, side streets, street ends. */
  kind: "signal" | "priority" | "end";
  name?: string;
  /** Signals with the same controller run one program. */
  controller?: string;
}

export interface EdgeSpec {
  id: string;
  from: string;
  to: string;
  lanes: number;
  speedMs: number;
  /** Inner vertices, metres; with `ownEnds` the whole line, which need not meet the nodes' points. */
  shape?: [number, number][];
  ownEnds?: boolean;
  /** Higher goes first where no signal stands. */
  priority?: number;
}

/** Lane-wise connection; lanes count from the kerb. Where one is given for an edge, all of that edge's must be. */
export interface ConnectionSpec {
  from: string;
  to: string;
  fromLane: number;
  toLane: number;
}

export interface SignalSpec {
  offsetS?: number;
  /** The near turn may be made at red after a stop. */
  turnOnRed?: boolean;
  /** Stretch or shorten the phase that gives protected green to a movement of one edge (SUMO's l, s, r). */
  greens?: { from: string; dir: "l" | "s" | "r"; factor: number }[];
}

/** Trips between the entries and exits of one connected part of the network. */
export interface Demand {
  /** Vehicles per hour that start at the upstream end of an edge. */
  entries: Record<string, number>;
  /** Weight with which trips end on an edge. */
  exits: Record<string, number>;
  /** Edges on which trips may also start and end part-way. */
  inner: string[];
}

/** Streets as the simulator's generator drew them: kinds of nodes, lanes and speeds are still open. */
export interface DrawnStreets {
  nodes: { id: string; x: number; y: number }[];
  edges: { id: string; from: string; to: string }[];
}

/** A way through the town on which one bus after another stops at the kerb. */
export interface BusLine {
  from: string;
  to: string;
  /** Edge and distance of the stop before its end, metres, in order. */
  stops: { edge: string; beforeEndM: number }[];
  everyS: number;
}

/** What a street network of the simulator's own making has beside nodes and edges. */
export interface Dressed {
  nodes: NodeSpec[];
  edges: EdgeSpec[];
  demand: Demand[];
  buses: BusLine[];
}

/** A network that the simulator's programs draw and sign; `nodes`, `edges`, `signals` and `demand` of its scenario are filled in then. */
export interface Generated {
  /** Arguments of netgenerate. */
  draw: string[];
  dress: (streets: DrawnStreets) => Dressed;
  /** Sum of the speeds of all lanes that reach a crossing, m/s, from which it is given a signal. */
  signalFromMs: number;
  /** Footways, crossings and people who walk over them, so many an hour at each signal. */
  walkersPerHour: number;
  /** Share of the signals at which the near turn may be made at red after a stop. */
  turnOnRedShare: number;
  /** Share of the trips that stop on the way, beside the lane or, on wide streets, in it. */
  errandShare: number;
}

export interface Scenario {
  id: string;
  title: string;
  driveSide: DriveSide;
  lat: number;
  lon: number;
  seed: number;
  nodes: NodeSpec[];
  edges: EdgeSpec[];
  connections?: ConnectionSpec[];
  cycleS: number;
  leftGreenS: number;
  turnarounds: boolean;
  signals?: Record<string, SignalSpec>;
  demand: Demand[];
  /** Fixed relations, vehicles per hour, beside entries and exits. */
  relations?: { from: string; to: string; perHour: number }[];
  /** Share of trips that start, and share that end, somewhere along an inner edge. */
  innerShare: number;
  /** Demand multiplier for each third of the recorded time. */
  profile: [number, number, number];
  /** 1 takes shortest paths, larger values spread routes. */
  routeSpread: number;
  warmUpS: number;
  recordedS: number;
  vehicles: "calm" | "default";
  generated?: Generated;
  buses?: BusLine[];
  /** Share of the vehicles whose courses are kept; 1 lets strips be tested on full data. */
  recordedShare: number;
}
