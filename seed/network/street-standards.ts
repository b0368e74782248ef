import type { StreetClass } from "../plan/streets";

export interface StreetStandard {
  lanes: number;
  /** What the quickest drivers do on the open road. */
  speedMs: number;
  /** Left-turn bay at signals; 0 where lefts share a lane. */
  bayM: number;
  /** From the middle of the junction to the stop line. */
  setbackM: number;
  /** From the centreline to the inner edge of a carriageway. */
  medianM: number;
}

export const LANE_WIDTH_M = 3.25;

export const STREET_STANDARDS: Record<StreetClass, StreetStandard> = {
  ring: { lanes: 2, speedMs: 64 / 3.6, bayM: 84, setbackM: 20, medianM: 4 },
  arterial: { lanes: 2, speedMs: 54 / 3.6, bayM: 63, setbackM: 17, medianM: 0.4 },
  street: { lanes: 1, speedMs: 50 / 3.6, bayM: 42, setbackM: 14, medianM: 0.2 },
  oneway: { lanes: 2, speedMs: 47 / 3.6, bayM: 0, setbackM: 14, medianM: 0 },
  local: { lanes: 1, speedMs: 43 / 3.6, bayM: 0, setbackM: 13, medianM: 0.2 },
};
