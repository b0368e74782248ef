import { quantileWithin } from "@/core/traversals/small-quantile";
import { TRAVERSAL_FLAGS, TURNS, type Movement, type Network, type Traversals } from "@/core/types";

/** Settings of stage 6. */
export const REFERENCE = Object.freeze({
  /** Quantile of unhindered traversals that stands for an undelayed vehicle. */
  share: 0.2,
  /** An unhindered traversal has no stop and loses no more than this share of a step of hinderedStepS against free speed. */
  lostShare: 0.3,
  hinderedStepS: 7,
  /** Turning vehicles slow down this near to the stop line without being hindered, m; what they may lose more than the usual, s. */
  turnSlowsM: 30,
  turnSpareS: 2,
  /** Steps of the track shorter than this tell no speed, s. */
  leastStepS: 2,
  /** Weights, in traversals, of "no difference" for turn class, leg and movement. */
  classN: 30,
  legN: 8,
  movementN: 8,
  /** From here on a reference counts as seen rather than shrunk. */
  seenN: 10,
});

/**
 * Stage 6: sets each movement's reference time and each traversal's delay. A reference is the time that the leg's free
 * speed and the turn's geometry ask for, moved by what unhindered traversals show: their small-sample quantile p(n + 1)
 * (Hyndman and Fan, Sample Quantiles in Statistical Packages, 1996, type 6), shrunk in turn to turn class, leg and
 * movement. Never faster than the speed limit. Delays are not clipped. O(track points + n log n).
 */
export function setReferences(network: Network, traversals: Traversals): void {
  setReferencesFrom(network, gatherUnhindered(network, traversals));
  setDelays(network, traversals);
}

/** The references of `setReferences` from the seconds that `gatherUnhindered` found, which are sorted in place. O(n log n). */
export function setReferencesFrom(network: Network, unhindered: number[][]): void {
  const built = network.movements.map((movement) => builtReferenceS(network, movement));
  const counts = unhindered.map((seconds) => seconds.length);
  const excess = unhindered.map((seconds, m) =>
    seconds.length > 0 ? quantileWithin(seconds.sort((a, b) => a - b), REFERENCE.share) - built[m] : 0,
  );
  const references = Float64Array.from(built);
  const shift = (groupOf: (movement: Movement) => number, groups: number, priorN: number): void => {
    const moved = shrunkMeans(network.movements.map(groupOf), groups, excess, counts, priorN);
    network.movements.forEach((movement, m) => {
      references[m] += moved[groupOf(movement)];
      excess[m] -= moved[groupOf(movement)];
    });
  };
  shift((movement) => TURNS.indexOf(movement.turn), TURNS.length, REFERENCE.classN);
  shift((movement) => movement.leg, network.legs.length, REFERENCE.legN);
  network.movements.forEach((movement, m) => {
    references[m] += (counts[m] * excess[m]) / (counts[m] + REFERENCE.movementN);
    movement.referenceS = Math.max(fastestS(network, movement), references[m]);
    movement.referenceN = counts[m];
    movement.referenceSource = counts[m] >= REFERENCE.seenN ? "unstopped" : counts[m] > 0 ? "shrunk" : "free-speed";
  });
}

/** Each traversal's delay against the reference of its movement. O(traversals). */
export function setDelays(network: Network, traversals: Traversals): void {
  for (let i = 0; i < traversals.length; i++) {
    const seconds = (traversals.exitMs[i] - traversals.enterMs[i]) / 1000;
    traversals.delayS[i] = seconds - network.movements[traversals.movement[i]].referenceS;
  }
}

/** Mean of the values of each group, weighted by counts, drawn to zero by a prior weight. */
function shrunkMeans(group: number[], groups: number, values: number[], counts: number[], priorN: number): Float64Array {
  const sum = new Float64Array(groups);
  const weight = new Float64Array(groups).fill(priorN);
  group.forEach((g, m) => {
    sum[g] += counts[m] * values[m];
    weight[g] += counts[m];
  });
  return sum.map((value, g) => value / weight[g]);
}

/** Seconds from cordon to cordon of the traversals that nothing slowed down, by movement. O(track points). */
export function gatherUnhindered(network: Network, traversals: Traversals): number[][] {
  const out: number[][] = network.movements.map(() => []);
  for (let i = 0; i < traversals.length; i++) {
    const isWhole = (traversals.flags[i] & TRAVERSAL_FLAGS.truncated) === 0;
    if (traversals.stops[i] > 0 || !isWhole) continue;
    const movement = network.movements[traversals.movement[i]];
    if (isUnhindered(traversals, i, movement, network.legs[movement.leg].freeSpeedMs)) {
      out[traversals.movement[i]].push((traversals.exitMs[i] - traversals.enterMs[i]) / 1000);
    }
  }
  return out;
}

function isUnhindered(traversals: Traversals, i: number, movement: Movement, freeSpeedMs: number): boolean {
  const { trackOffset, trackT, trackS } = traversals;
  const turnS = movement.turn === "through" ? 0 : turnAllowanceS(movement.turnDeg) + REFERENCE.turnSpareS;
  let from = -1;
  for (let n = trackOffset[i]; n < trackOffset[i + 1]; n++) {
    if (trackS[n] > movement.cordonUpM + 1) continue;
    if (from >= 0 && trackT[n] - trackT[from] < REFERENCE.leastStepS) continue;
    if (from >= 0) {
      const seconds = trackT[n] - trackT[from];
      const lostS = seconds - (trackS[from] - trackS[n]) / freeSpeedMs;
      const mayLoseS = trackS[n] < REFERENCE.turnSlowsM ? turnS : 0;
      if (lostS > mayLoseS + REFERENCE.lostShare * Math.min(seconds, REFERENCE.hinderedStepS)) return false;
    }
    from = n;
  }
  return true;
}

function fastestS(network: Network, movement: Movement): number {
  const limit = network.legs[movement.leg].speedLimitMs;
  return limit > 0 ? windowM(network, movement) / limit : 0;
}

/** Length of a movement's window, across the box on the chord, m. */
function windowM(network: Network, movement: Movement): number {
  const leg = network.legs[movement.leg];
  const exit = network.exits[movement.exit];
  return movement.cordonUpM + Math.hypot(exit.line[0] - leg.line[0], exit.line[1] - leg.line[1]) + movement.cordonDownM;
}

/** Seconds that a turn costs against going straight: braking to the speed of its bend and back. */
export function turnAllowanceS(turnDeg: number): number {
  const angle = Math.abs(turnDeg);
  if (angle <= 30) return 0;
  return angle > 150 ? 6 : ((angle - 30) / 60) * 1.9;
}

/** Reference from the leg's free speed and the turn's geometry. */
export function builtReferenceS(network: Network, movement: Movement): number {
  return windowM(network, movement) / network.legs[movement.leg].freeSpeedMs + turnAllowanceS(movement.turnDeg);
}
