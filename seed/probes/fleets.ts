/** A supplier's vehicles: how often they report and what they leave out. */
export interface Fleet {
  prefix: string;
  intervalS: number;
  /** Share of all probe vehicles. */
  share: number;
  hasHeading: boolean;
  /** Speed rounded to whole km/h. */
  isCoarse: boolean;
}

/** One row mixes fleets, as bought data does. */
export const FLEETS: Fleet[] = [
  { prefix: "k", intervalS: 1, share: 0.03, hasHeading: true, isCoarse: false },
  { prefix: "r", intervalS: 3, share: 0.1, hasHeading: true, isCoarse: false },
  { prefix: "d", intervalS: 5, share: 0.35, hasHeading: true, isCoarse: true },
  { prefix: "w", intervalS: 10, share: 0.3, hasHeading: false, isCoarse: true },
  { prefix: "t", intervalS: 15, share: 0.22, hasHeading: true, isCoarse: true },
];

/** Share of vehicles that report, over all fleets. */
export const PENETRATION = { demo: 0.04, small: 0.08 } as const;

/** Error of a position: mostly slow drift (Gauss-Markov), a little that is new with each ping. */
export const DRIFT_SIGMA_M = 3.9;
export const DRIFT_TIME_S = 35;
export const JITTER_SIGMA_M = 0.8;
export const SPEED_SIGMA_MS = 0.35;
export const HEADING_SIGMA_DEG = 2.5;
