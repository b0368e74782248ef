import type { Estimate, Evidence, Turn } from "@/core/types";

/**
 * Everything that ranking needs of one local day, as columns: small enough to keep a city's months in memory.
 * A cell is one movement in one local quarter of an hour (0 to 95) with at least one traversal.
 */
export interface ScreenDay {
  /** Days since 1970-01-01 of the local calendar day. */
  day: number;
  methodVersion: number;
  cells: number;
  /** Key of the movement: the number that the caller knows it by. */
  movement: Uint32Array;
  quarter: Uint8Array;
  /** Traversals of cell c: entries offset[c] to offset[c + 1] of the columns below. */
  offset: Uint32Array;
  delayS: Float32Array;
  stops: Uint8Array;
  /** Hash of the vehicle, for counting distinct ones. */
  vehicle: Uint32Array;
  /** One entry for each leg and quarter that the sample saw. */
  legQuarters: number;
  leg: Uint32Array;
  legQuarter: Uint8Array;
  reachM: Float32Array;
  reachEstimateM: Float32Array;
  spilledS: Float32Array;
  observedS: Float32Array;
}

/** Which movement belongs to which leg and junction; keys are the caller's. */
export interface Catalogue {
  movements: { key: number; leg: number; junction: number; turn: Turn }[];
  legs: { key: number; junction: number; storageM: number }[];
}

export interface ScoreFilter {
  /** Local quarters, `toQuarter` exclusive. */
  fromQuarter: number;
  toQuarter: number;
  /** Null for any. */
  turn: Turn | null;
}

export interface MovementScore {
  movement: number;
  vehicles: number;
  /** Counted up to 50: evidence asks for no more. */
  distinctVehicles: number;
  days: number;
  delay: Estimate;
  medianS: number;
  p95S: number;
  shrunk: Estimate;
  stopShare: Estimate;
  stopsPerVehicle: number;
  evidence: Evidence;
}

export interface LegScore {
  leg: number;
  vehicles: number;
  delay: Estimate;
  reachP50M: number;
  reachP95M: number;
  reachEstimateP95M: Estimate;
  spill: Estimate;
  evidence: Evidence;
}

export interface JunctionScore {
  junction: number;
  vehicles: number;
  /** Counted up to 50: evidence asks for no more. */
  distinctVehicles: number;
  days: number;
  delay: Estimate;
  medianS: number;
  p95S: number;
  shrunk: Estimate;
  /** Competition rank by shrunk mean delay, 1 is worst; NaN where evidence is "none". */
  rank: number;
  rankLow: number;
  rankHigh: number;
  /** Movement with the highest shrunk delay among those with evidence; -1 when none has. */
  worstMovement: number;
  stopShare: Estimate;
  stopsPerVehicle: number;
  /** The leg with the greatest reach in proportion to its storage; -1 when none was seen. */
  worstLeg: number;
  /** Greatest spillback share among its legs. */
  spill: Estimate;
  hoursSeen: number;
  evidence: Evidence;
}

export interface ScreenScores {
  junctions: JunctionScore[];
  movements: MovementScore[];
  legs: LegScore[];
  traversals: number;
}
