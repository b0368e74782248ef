import { REACTION_S } from "./lanes";
import { RING, RING_MASK, type LaneState } from "./state";

/**
 * Times at which a vehicle leaves each place of a lane, from place `places` (the entry) down to 0
 * (the exit), into `out`. Newell (2002): the latest of its own free path, the free paths of its
 * leaders set back by one place and one reaction time each, and the exits of those ahead carried
 * upstream by the backward wave. Returns false, filling only both ends, when it
 * drove freely with nobody in front.
 */
export function placeTimesInto(lanes: LaneState, lane: number, vehicle: number, pace: (trip: number) => number, out: Float64Array): boolean {
  const places = lanes.places[lane];
  const base = lane * RING;
  const own = base + (vehicle & RING_MASK);
  const entryS = lanes.entryS[own];
  const exitS = lanes.exitS[own];
  const stepS = lanes.spacingM[lane] / lanes.speedMs[lane];
  out[places] = entryS;
  out[0] = exitS;
  const isAlone = vehicle === 0 || lanes.exitS[base + ((vehicle - 1) & RING_MASK)] + REACTION_S < entryS;
  if (isAlone && exitS - entryS <= (places * stepS) / pace(lanes.vehicle[own]) + 1e-6) return false;
  const ownStepS = stepS / pace(lanes.vehicle[own]);
  for (let j = places - 1; j >= 0; j--) {
    const ahead = vehicle - j;
    const waveS = j === 0 ? exitS : ahead >= 0 ? lanes.exitS[base + (ahead & RING_MASK)] + j * REACTION_S : -Infinity;
    out[j] = Math.max(entryS + (places - j) * ownStepS, waveS);
  }
  for (let k = 1; k < places && k <= vehicle; k++) {
    const at = base + ((vehicle - k) & RING_MASK);
    if (lanes.exitS[at] + k * REACTION_S < entryS) break;
    const leaderStepS = stepS / pace(lanes.vehicle[at]);
    const setBackS = lanes.entryS[at] + k * REACTION_S;
    for (let j = places - 1; j >= k; j--) {
      const heldS = setBackS + (places - j + k) * leaderStepS;
      if (heldS > out[j]) out[j] = heldS;
    }
  }
  return true;
}
