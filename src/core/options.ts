import type { DriveSide } from "@/core/types";

/** A leg line that the city drew, towards the stop line, in degrees. */
export interface GivenLeg {
  junctionId: string;
  name?: string;
  lat: Float64Array;
  lon: Float64Array;
  /** NaN where not given. */
  speedLimitMs: number;
  /** NaN where not given. */
  storageM: number;
}

export interface CoreOptions {
  driveSide: DriveSide;
  /** Drawn legs; at a junction with any, they replace the derived ones. */
  givenLegs?: readonly GivenLeg[];
}

/** Limits of stage 2. */
export const CLEANING = Object.freeze({
  /** Implied speed above which a step is impossible, m/s. */
  maxSpeedMs: 60,
  /** Spread of position noise that a step may add to its length, m. */
  noiseM: 40,
  /** A longer silence ends a trip, s. */
  maxGapS: 180,
});
