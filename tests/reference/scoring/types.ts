import type { Turn } from "@/core/types";

import type { Passage, Truth } from "../truth/types";

/** One row as the `screen` command writes it; NaN where the cell is empty. */
export interface ScreenRow {
  junctionId: string;
  approachBearingDeg: number;
  turn: Turn;
  /** ISO 8601 in UTC, or "all". */
  intervalStart: string;
  vehicles: number;
  meanDelayS: number;
  stopShare: number;
  queueReachM: number;
  spillbackShare: number;
}

/** One traversal found by the core; lets turns and counts be scored vehicle by vehicle. */
export interface FoundTraversal {
  vehicleId: string;
  junctionId: string;
  approachBearingDeg: number;
  turn: Turn;
  stopLineMs: number;
}

export interface ScoreInput {
  truth: Truth;
  oracle: Truth;
  /** True passages of the vehicles in this sampling. */
  passages: Passage[];
  /** Ping times of each vehicle in this sampling, ascending, ms UTC. */
  pingTimes: Map<string, number[]>;
  intervalS: number;
  rows: ScreenRow[];
  traversals?: FoundTraversal[];
}

/** Ours beside the oracle's. */
export interface Pair {
  ours: number;
  oracle: number;
}

export interface Scores {
  legRecall: number;
  legPrecision: number;
  /** Share of found traversals, matched to a true passage, whose turn is right; from movement counts where no traversals are given. */
  turnsRight: number;
  /** Distance of the number of traversals from the band [complete passages with a ping on the leg and one after, all over the stop line], as a share. */
  countError: number;
  /** Found traversals without any true passage near, as a share; NaN without traversals. */
  falseTraversals: number;
  /** Share of the traffic on movements that the sample used for which we give a figure. */
  coverage: number;
  /** Vehicle-weighted mean absolute error and bias of mean delay per movement, seconds. */
  delayMaeS: Pair;
  delayBiasS: Pair;
  stopShareMae: Pair;
  /** Of the legs that the sample used, metres. */
  reachMaeM: Pair;
  reachBiasM: Pair;
  /** Legs that spill back at least 2 % of the time. */
  spillbackPrecision: Pair;
  spillbackRecall: Pair;
  /** Spearman's rank correlation of junctions with the truth. */
  rankByDelay: Pair;
  rankByVehicleHours: Pair;
}
