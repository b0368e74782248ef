import type { Network, Traversals } from "@/core/types";

/** From this many unhindered traversals on, a reference is settled: later files are measured against it. */
export const SETTLED_N = 30;
/** Cordons that moved by less than this bound the same way, m. */
const SAME_CORDON_M = 2;

/**
 * Keeps the references of an earlier network, so that days from different files are measured by one yardstick: a
 * settled one stays, of two thin ones the mean weighted by their traversals counts. Delays follow. A movement whose
 * cordons moved since has no earlier reference. `network` and `traversals` are changed in place. O(movements + traversals).
 */
export function keepSettledReferences(network: Network, traversals: Traversals, earlier: Network): void {
  const shiftS = settleReferences(network, earlier);
  for (let i = 0; i < traversals.length; i++) traversals.delayS[i] += shiftS[traversals.movement[i]];
}

/** `keepSettledReferences` without the traversals: seconds by which the delays of each movement grow. O(movements). */
export function settleReferences(network: Network, earlier: Network): Float64Array {
  const known = new Map(earlier.movements.map((movement) => [movement.id, movement]));
  const shiftS = new Float64Array(network.movements.length);
  network.movements.forEach((movement, m) => {
    const old = known.get(movement.id);
    if (!old || !(old.referenceS > 0) || old.referenceN === 0) return;
    const isSameWay =
      Math.abs(old.cordonUpM - movement.cordonUpM) < SAME_CORDON_M && Math.abs(old.cordonDownM - movement.cordonDownM) < SAME_CORDON_M;
    if (!isSameWay) return;
    const n = old.referenceN + movement.referenceN;
    const kept = old.referenceN >= SETTLED_N ? old.referenceS : (old.referenceN * old.referenceS + movement.referenceN * movement.referenceS) / n;
    shiftS[m] = movement.referenceS - kept;
    movement.referenceS = kept;
    movement.referenceN = n;
    if (old.referenceN >= movement.referenceN - old.referenceN) movement.referenceSource = old.referenceSource;
  });
  return shiftS;
}
