/** Settings of the matching in stage 5. Costs are negative log likelihoods. */
export const MATCHING = Object.freeze({
  /** Lateral spread of pings around a link's line, and the farthest that counts, m. */
  sideSpreadM: 7,
  sideLimitM: 30,
  /** Spread of headings along a link, and inside a junction's box, degrees; cost at most headingMostCost. */
  headingSpreadDeg: 18,
  boxHeadingSpreadDeg: 35,
  headingLimitDeg: 100,
  headingMostCost: 9,
  /** A heading below this speed says little, m/s. */
  headingMinSpeedMs: 2,
  /** How far links go on into the boxes at their ends, m. */
  boxOverlapM: 16,
  /** Links are matched without vertices that lie this near to the rest of their line: far below the pings' spread, m. */
  simplifyM: 0.4,
  /** Side of the cells in which a ping looks for links, m. */
  cellM: 32,
  candidates: 6,
  /** Cost of a ping off the network, of leaving it and of joining it. */
  offCost: 5,
  leaveCost: 3,
  joinCost: 3,
  /** Cost of passing a junction, and of turning round in one. */
  junctionCost: 0.3,
  uturnCost: 5,
  /** Moving back along a link is free up to this noise, m; then costs one for each backSpreadM. */
  backFreeM: 8,
  backSpreadM: 4,
  /** Who falls back farther than this on a link has driven round to it, m. */
  loopM: 60,
  /** Detours cost one for each detourM plus this share of the chord. */
  detourM: 12,
  detourShare: 0.15,
  fastestMs: 38,
  /** What a vehicle may drive beyond that, m, and how far more costs one. */
  reachSpareM: 30,
  reachSpreadM: 10,
  /** Farthest way searched between two pings, m, and most junctions on it; how far the first search goes. */
  routeMostM: 1500,
  routeNearM: 500,
  routeMostJunctions: 8,
  /** Pings that follow sooner than this are passed over, s. */
  thinS: 2.9,
  /** Two trusted stretches may be joined over this many stray pings. */
  bridgePings: 2,
  /** More where the vehicle moved less than this over them, m, within this time, s. */
  waitingM: 60,
  waitingMostS: 180,
});

/**
 * No place as dear as leaving the network, one ping off it and joining it again is ever on the likeliest path, and no
 * step as dear as leaving and joining: they may be left out without a change to it.
 */
export const DEAREST: number = MATCHING.leaveCost + MATCHING.offCost + MATCHING.joinCost;
export const DEAREST_STEP: number = MATCHING.leaveCost + MATCHING.joinCost;
