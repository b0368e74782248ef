import type { DriveSide, Turn } from "@/core/types";

/** What happened on one movement in one interval. */
export interface MovementFigures {
  vehicles: number;
  meanDelayS: number;
  p95DelayS: number;
  stopShare: number;
  stopsPerVehicle: number;
}

/** What happened on one leg in one interval. */
export interface LegFigures {
  /** Greatest distance of the standing column's tail from the stop line, metres; 0 without a queue. */
  reachM: number;
  /** Share of the interval in which the tail stood at 90 % of the storage or beyond; null without a storage length. */
  spillbackShare: number | null;
}

/** Keyed by interval start (ISO 8601, UTC) and by "all". */
export type ByInterval<T> = Record<string, T>;

export interface TrueMovement {
  turn: Turn;
  /** The edges that vehicles leave by; several where two exits have the same turn. */
  exits: { edge: string; bearingDeg: number; signedDeg: number; referenceS: number }[];
  figures: ByInterval<MovementFigures>;
}

export interface TrueLeg {
  junctionId: string;
  /** Simulator edge at the stop line. */
  edge: string;
  /** Direction of travel at the stop line. */
  bearingDeg: number;
  /** Distance from the stop line to the upstream signalised junction's box; null where the street comes from outside. */
  storageM: number | null;
  upstreamJunctionId: string | null;
  /** Upstream cordon used for delay, metres from the stop line. */
  cordonUpM: number;
  /** [lat, lon] from the stop line upstream. */
  centreline: [number, number][];
  figures: ByInterval<LegFigures>;
  movements: TrueMovement[];
}

export interface Truth {
  scenario: string;
  title: string;
  driveSide: DriveSide;
  /** Where the scenario's plane touches the globe, degrees. */
  origin: { lat: number; lon: number };
  startMs: number;
  endMs: number;
  junctions: { id: string; name: string; lat: number; lon: number }[];
  legs: TrueLeg[];
}

/** One true passage of one sampled vehicle over a stop line. */
export interface Passage {
  vehicleId: string;
  junctionId: string;
  approachBearingDeg: number;
  turn: Turn;
  enterMs: number;
  stopLineMs: number;
  exitMs: number;
  /** Null where the passage is not complete. */
  delayS: number | null;
  stops: number;
  /** False where trip or recording begins or ends between the cordons: passed, but not scored. */
  isComplete: boolean;
}
