import { listMovements } from "@/core/legs/movements";
import type { Network } from "@/core/types";

/** The network with its movements listed anew after legs changed; those that remain keep their references. O(movements). */
export function relistMovements(network: Network): Network {
  const known = new Map(network.movements.map((movement) => [movement.id, movement]));
  const movements = listMovements(network).map((movement) => {
    const old = known.get(movement.id);
    if (!old) return movement;
    const { referenceS, referenceSource, referenceN } = old;
    return { ...movement, referenceS, referenceSource, referenceN };
  });
  return { ...network, movements };
}
