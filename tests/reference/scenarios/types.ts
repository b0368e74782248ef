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
  /** Share of the vehicles whose courses are kept; 1 lets strips be tested on full data. */
  recordedShare: number;
}
