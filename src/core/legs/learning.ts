/** Settings of stage 4. Lengths in metres, angles in degrees. */
export const LEARNING = Object.freeze({
  /** Seeds: moving pings in this ring around the junction. */
  ringInnerM: 22,
  ringOuterM: 100,
  /** The ring ends at this share of the way to the nearest junction, but not below ringLeastM. */
  ringShare: 0.62,
  ringLeastM: 45,
  /** Slowest ping that counts as moving, m/s. */
  movingMs: 2.5,
  headingToRayDeg: 37,
  /** The line of travel must pass the junction within this distance; spread of its weight. */
  passWithinM: 30,
  passSpreadM: 16,
  kernelDeg: 7,
  apartDeg: 22,
  /** Distinct trips that a seed needs, and as a share of the junction's trips. */
  seedTrips: 2,
  seedShare: 0.003,
  /** Default distance from the junction's point to a stop line. */
  boxM: 14,
  /** Tracing outwards. */
  stepM: 10,
  sideM: 13,
  sideSpreadM: 7,
  traceHeadingDeg: 35,
  traceSpreadDeg: 14,
  gapM: 70,
  sparseGapM: 120,
  traceMostM: 800,
  /** Corners that one trace may go round. */
  mostBends: 3,
  /** A seed is worth this many points, also where no ping lies on its trace. */
  leastPoints: 5,
  /** A trace ends at another junction whose point it passes within this distance. */
  meetsWithinM: 25,
  /** Shortest link between two junctions, m. */
  leastLinkM: 5,
  /** Pings at longer intervals than this count as sparse, s. */
  sparseIntervalS: 8,
});

/** How much of the traffic learning takes. */
export const LEARNING_SAMPLE = Object.freeze({
  /** Pings for each junction, and seconds of seen driving, whichever is more: legs, turns and delays stay as with all pings. */
  pingsPerJunction: 1500,
  secondsPerJunction: 7500,
  /** Fewer in all are not worth leaving any out. */
  leastPings: 300_000,
  /** Only pings this near to a junction count, m. */
  nearM: 200,
});

/**
 * Pings near junctions, of whole vehicles taken evenly over all hours, from which streets are learned as well as from all of them: of the
 * reference set at 5 s, legs, turns and delays are the same from 1,200 for each junction on, and legs are lost at 600.
 * Frequent pings tell little more each than their vehicle's last one. `medianIntervalS` is NaN where unknown.
 * learnNetwork itself takes no more than these of what it is given, so a caller may hand over more, and spares time and
 * memory (some 100 bytes a ping) by handing over about as many: these divided by the nearShare of the file.
 */
export function learningPings(junctions: number, medianIntervalS: number): number {
  const { pingsPerJunction, secondsPerJunction, leastPings } = LEARNING_SAMPLE;
  const each = Math.max(pingsPerJunction, medianIntervalS > 0 ? secondsPerJunction / Math.max(1, medianIntervalS) : 0);
  return Math.max(leastPings, Math.ceil(junctions * each));
}
