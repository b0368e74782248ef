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
  /** Distance between claimed points along a link, m. */
  claimStepM: 24,
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
  /** Detours cost one for each detourM plus this share of the chord. */
  detourM: 12,
  detourShare: 0.15,
  fastestMs: 38,
  /** Farthest way searched between two pings, m, and most junctions on it. */
  routeMostM: 1500,
  routeMostJunctions: 8,
  /** Pings that follow sooner than this are passed over, s. */
  thinS: 2.9,
  /** Two trusted stretches may be joined over this many stray pings. */
  bridgePings: 2,
  /** More where the vehicle moved less than this over them, m, within this time, s. */
  waitingM: 60,
  waitingMostS: 180,
});
