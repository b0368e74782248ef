import { quantileWithin } from "@/core/traversals/small-quantile";
import type { Movement, Network, Traversals } from "@/core/types";

/** Settings of stage 6. */
export const REFERENCE = Object.freeze({
  /** Quantile of unstopped traversals that stands for an undelayed vehicle. */
  share: 0.15,
  /** Weight of the free-speed build in numbers of unstopped traversals. */
  priorN: 8,
  leastN: 2,
});

/**
 * Stage 6: sets each movement's reference time and each traversal's delay. The reference is the small-sample
 * quantile p(n + 1) (Hyndman and Fan, Sample Quantiles, 1996, type 6) of traversals without a stop, shrunk to the
 * time built from the leg's free speed and the turn's geometry. Delays are not clipped. O(n log n).
 */
export function setReferences(network: Network, traversals: Traversals): void {
  const byMovement: number[][] = network.movements.map(() => []);
  for (let i = 0; i < traversals.length; i++) {
    if (traversals.stops[i] === 0) byMovement[traversals.movement[i]].push((traversals.exitMs[i] - traversals.enterMs[i]) / 1000);
  }
  network.movements.forEach((movement, m) => setReference(network, movement, byMovement[m]));
  for (let i = 0; i < traversals.length; i++) {
    const seconds = (traversals.exitMs[i] - traversals.enterMs[i]) / 1000;
    traversals.delayS[i] = seconds - network.movements[traversals.movement[i]].referenceS;
  }
}

function setReference(network: Network, movement: Movement, unstoppedS: number[]): void {
  const built = builtReferenceS(network, movement);
  const n = unstoppedS.length;
  movement.referenceN = n;
  if (n < REFERENCE.leastN) {
    movement.referenceS = built;
    movement.referenceSource = "free-speed";
    return;
  }
  const seen = quantileWithin(unstoppedS.sort((a, b) => a - b), REFERENCE.share);
  const weight = n / (n + REFERENCE.priorN);
  const limit = network.legs[movement.leg].speedLimitMs;
  const fastest = limit > 0 ? (movement.cordonUpM + movement.cordonDownM) / limit : 0;
  movement.referenceS = Math.max(fastest, weight * seen + (1 - weight) * built);
  movement.referenceSource = n >= 10 ? "unstopped" : "shrunk";
}

/** Seconds that a turn costs against going straight, by its angle: braking to the speed of its radius and back. */
export function turnAllowanceS(turnDeg: number): number {
  const angle = Math.abs(turnDeg);
  if (angle <= 30) return 0;
  return angle > 150 ? 6 : ((angle - 30) / 60) * 1.9;
}

/** Reference from the leg's free speed and the turn's geometry. */
export function builtReferenceS(network: Network, movement: Movement): number {
  const leg = network.legs[movement.leg];
  const exit = network.exits[movement.exit];
  const box = Math.hypot(exit.line[0] - leg.line[0], exit.line[1] - leg.line[1]);
  return (movement.cordonUpM + box + movement.cordonDownM) / leg.freeSpeedMs + turnAllowanceS(movement.turnDeg);
}
