/**
 * The shapes that the stages of the core hand to each other. Plain data, typed arrays, no behaviour.
 *
 * Units are in the names. Positions in a junction's plane are east and north metres from its point;
 * bearings are degrees clockwise from true north in the direction of travel; `s` is the distance to
 * the stop line along the leg's centreline, positive upstream, negative past it. Missing is NaN.
 */

/** One batch of pings as columns; every array holds at least `length` values. */
export interface PingColumns {
  length: number;
  /** Dense vehicle number from 0; names stay outside the core. */
  vehicle: Uint32Array;
  /** Milliseconds UTC. */
  tMs: Float64Array;
  lat: Float64Array;
  lon: Float64Array;
  /** NaN where the supplier gave none. */
  speedMs: Float32Array;
  /** NaN where the supplier gave none. */
  headingDeg: Float32Array;
}

export interface JunctionPoint {
  /** The city's own identifier, unique. */
  id: string;
  lat: number;
  lon: number;
}

export type DriveSide = "right" | "left";

export const TURNS = ["left", "through", "right", "uturn"] as const;
export type Turn = (typeof TURNS)[number];

/** Where a leg or its stop line comes from: found in the pings, given as a drawn line, or set by an engineer. */
export type Origin = "derived" | "given" | "set";

/** An approach leg of one junction. */
export interface Leg {
  /** Stable from upload to upload. */
  id: string;
  /** Index into `Network.junctions`. */
  junction: number;
  name: string;
  /** Direction of travel of vehicles where they reach the stop line. */
  bearingDeg: number;
  /** Centreline in the junction's plane, x then y for each vertex, from the stop line upstream: s is arc length. */
  line: Float64Array;
  lengthM: number;
  /** Index into `Network.exits` of the upstream junction's exit that feeds this leg; -1 where none is known. */
  upstreamExit: number;
  /** Distance from the stop line to the upstream junction's box, or given; NaN where unknown. */
  storageM: number;
  freeSpeedMs: number;
  /** NaN where unknown. */
  speedLimitMs: number;
  origin: Origin;
  stopLineOrigin: Origin | "default";
  locked: boolean;
  /** Distinct vehicles that the leg was learned from. */
  support: number;
  /** Sentences that say why an engineer should look at this leg. */
  doubts: string[];
}

/** An outbound leg of one junction. */
export interface Exit {
  id: string;
  junction: number;
  /** Direction of travel of vehicles that leave. */
  bearingDeg: number;
  /** Centreline in the junction's plane from the junction outwards. */
  line: Float64Array;
  lengthM: number;
  support: number;
}

export type ReferenceSource = "unstopped" | "shrunk" | "free-speed";

/** A turning movement: one leg to one exit of the same junction. */
export interface Movement {
  /** `${leg.id}>${exit.id}` */
  id: string;
  leg: number;
  exit: number;
  /** Signed, positive to the right, in (-180, 180]. */
  turnDeg: number;
  turn: Turn;
  /** Time an undelayed vehicle needs from cordon to exit cordon. NaN until enough is known. */
  referenceS: number;
  referenceSource: ReferenceSource;
  /** Traversals that the reference rests on. */
  referenceN: number;
  /** Cordon distances in use for this movement, metres from the stop line. */
  cordonUpM: number;
  cordonDownM: number;
}

/** What the pings teach about the streets: the graph that trips are matched over. */
export interface Network {
  junctions: JunctionPoint[];
  legs: Leg[];
  exits: Exit[];
  movements: Movement[];
  driveSide: DriveSide;
}

/** One vehicle passing one junction, as columns. */
export interface Traversals {
  length: number;
  /** Index into `Network.movements`. */
  movement: Uint32Array;
  vehicle: Uint32Array;
  /** Crossing of the upstream cordon, ms UTC. */
  enterMs: Float64Array;
  /** Crossing of the virtual line 15 m past the stop line, ms UTC. */
  stopLineMs: Float64Array;
  /** Crossing of the exit cordon, ms UTC. */
  exitMs: Float64Array;
  /** Control delay: exit minus enter minus the movement's reference. Not clipped at zero. */
  delayS: Float32Array;
  stops: Uint8Array;
  stoppedS: Float32Array;
  /** Farthest s at which the vehicle stood on this leg; NaN when it did not stop, or nothing tells where. */
  farthestStopM: Float32Array;
  /** Bits of TRAVERSAL_FLAGS. */
  flags: Uint8Array;
  /** Track of traversal i: entries trackOffset[i] to trackOffset[i + 1] of trackS and trackT. */
  trackOffset: Uint32Array;
  /** Seconds after enterMs; negative before the cordon on a leg longer than the cordon. */
  trackT: Float32Array;
  /** s in metres, falling along the track, from the leg's upstream end to past the stop line. */
  trackS: Float32Array;
}

/**
 * Tracks of vehicles that came along a leg and were still on it when their trip or the file ended. No traversals; they
 * only tell of the queue in which they stood.
 */
export interface OpenTracks {
  length: number;
  /** Index into `Network.legs`. */
  leg: Uint32Array;
  vehicle: Uint32Array;
  /** First point, ms UTC. */
  enterMs: Float64Array;
  /** As in `Traversals`. */
  trackOffset: Uint32Array;
  trackT: Float32Array;
  trackS: Float32Array;
}

export const TRAVERSAL_FLAGS = {
  /** Pings are too far apart to see stops: their number is a lower bound. */
  stopsLowerBound: 1,
  /** A stop was inferred from the excess time between two pings. */
  stopInferred: 2,
  /** The trip begins or ends inside the window; a part was corrected for. */
  truncated: 4,
} as const;

/** What was seen of the queue on a leg in each quarter of an hour of a day, as columns. */
export interface LegQuarters {
  length: number;
  /** Index into `Network.legs`. */
  leg: Uint32Array;
  /** Start of the quarter, ms UTC. */
  startMs: Float64Array;
  /** Farthest observed reach of the standing column in the quarter; 0 when vehicles passed and none stood; NaN when nothing was seen. */
  reachM: Float32Array;
  /** Reach estimated for the unseen tail (model); NaN as above. */
  reachEstimateM: Float32Array;
  /** Seconds of the quarter in which the queue filled at least 90 % of the storage. */
  spilledS: Float32Array;
  /** Seconds of the quarter for which the sample can say. */
  observedS: Float32Array;
}

/** Counts of what was left out and why, for the report. */
export interface CleanReport {
  pings: number;
  duplicates: number;
  jumps: number;
  trips: number;
  farFromJunctions: number;
  /** Trips that began, ended or left the streets inside a window: counted, not scored. */
  incompleteTraversals: number;
}

/** Estimated from the data and shown on every figure. */
export interface SampleFacts {
  medianIntervalS: number;
  hasSpeed: boolean;
  hasHeading: boolean;
  vehicles: number;
  /** Share of traffic seen, from queues; NaN where it cannot be said. */
  penetration: number;
}

export type Evidence = "strong" | "fair" | "thin" | "none";

/** A figure with its 95 % interval; all NaN where the sample says nothing. */
export interface Estimate {
  value: number;
  low: number;
  high: number;
}
