import type { QueueOptions } from "./options";
import type { Standings } from "./standings";

const QUARTER_S = 900;

/**
 * Road that the queue is expected to take behind the last seen vehicle, metres: a model, not an observation.
 *
 * After Comert and Cetin (EJOR 197, 2009): vehicles that arrive while the last seen one stands queue up behind it
 * unseen, E = (1 - p) λ τ. Here in metres of road, so that neither the penetration p nor the number of lanes is
 * needed: seen vehicles arrive at rate λp and stand κ to the metre, the queue therefore grows by λp / κ metres a
 * second while nobody else is seen to join. Never more than the mean gap between seen vehicles, 1 / κ.
 */
export function unseenTailM(indices: number[], standings: Standings, arrivals: number, reachM: number, options: QueueOptions): number {
  let last = -1;
  for (const k of indices) {
    const isFarther = standings.s[k] <= reachM && (last < 0 || standings.s[k] > standings.s[last]);
    if (isFarther) last = k;
  }
  if (last < 0) return 0;
  const joined = indices.filter((k) => standings.fromMs[k] <= standings.fromMs[last] && standings.toMs[k] >= standings.fromMs[last]);
  // Vehicles ahead of the last one give the density without its own bias; half a vehicle where none is seen.
  const perMetre = Math.max(0.5, joined.length - 1) / Math.max(reachM, options.jamSpacingM);
  const stoodS = (standings.toMs[last] - standings.fromMs[last]) / 1000;
  const growthMs = arrivals / QUARTER_S / perMetre;
  return Math.min(growthMs * stoodS, 1 / perMetre);
}
