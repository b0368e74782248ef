import type { Estimate, Evidence, Turn } from "@/core/types";

/**
 * Everything that ranking needs of one local day, as columns: small enough to keep a city's months in memory.
 * Two tables of rows: a movement's traversals and a leg's quarters of an hour, each in ascending order of its key, so
 * that a window of the day is one stretch of each row. Codes are those of `stored-figures`.
 */
export interface ScreenDay {
  /** Days since 1970-01-01 of the local calendar day. */
  day: number;
  methodVersion: number;
  /** Keys of the movements that were passed: the numbers that the caller knows them by. */
  movement: Uint32Array;
  /** Traversals of row r: entries movementStart[r] to movementStart[r + 1], in order of quarter, vehicle, delay. */
  movementStart: Uint32Array;
  /** Hash of the vehicle, for counting distinct ones. */
  vehicle: Uint32Array;
  delay: Uint16Array;
  /** Local quarter of an hour, 0 to 95. */
  quarter: Uint8Array;
  stops: Uint8Array;
  /** Keys of the legs that the sample saw. */
  leg: Uint32Array;
  /** Quarters of row r: entries legStart[r] to legStart[r + 1], ascending. */
  legStart: Uint32Array;
  reach: Uint16Array;
  reachEstimate: Uint16Array;
  spilled: Uint16Array;
  observed: Uint16Array;
  legQuarter: Uint8Array;
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
  shrunk: Estimate;
  stopShare: Estimate;
  stopsPerVehicle: number;
  evidence: Evidence;
}

export interface LegScore {
  leg: number;
  vehicles: number;
  delay: Estimate;
  reachP95M: number;
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
  /** By key; undefined for what the catalogue does not list. */
  movement(key: number): MovementScore | undefined;
  leg(key: number): LegScore | undefined;
  traversals: number;
}

/** What a page of one junction shows beside the scores, and no ranking needs. NaN where too few were seen. */
export interface MovementDetail {
  medianS: number;
  p95S: number;
}

export interface LegDetail {
  reachP50M: number;
  reachEstimateP95M: Estimate;
}
