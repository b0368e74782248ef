import type { City } from "../network/types";
import type { SignalPlan } from "../signals/plan";

export interface SignalClock {
  /** The first moment from `atS` on at which the movement may go by right, or by gap in its permitted window. */
  nextGreenS(movement: number, atS: number): number;
  /** Whether at this moment the movement must find a gap. */
  isPermitted(movement: number): boolean;
  /** The last moments of a permitted window, when those who wait in the junction clear it. */
  isClearing(movement: number, atS: number): boolean;
}

/** After the permitted green ends, a vehicle that waited inside the junction completes its turn. */
export const CLEARING_S = 2.5;

export function createSignalClock(city: City, plan: SignalPlan): SignalClock {
  const node = Int32Array.from(city.movements, (movement) => movement.node);
  const isPermitted = Uint8Array.from(city.movements, (_, m) => (Number.isNaN(plan.greenStartS[m]) ? 1 : 0));
  const start = city.movements.map((_, m) => (isPermitted[m] ? plan.permitStartS[m] : plan.greenStartS[m]));
  const end = city.movements.map((_, m) => (isPermitted[m] ? plan.permitEndS[m] + CLEARING_S : plan.greenEndS[m]));
  const from = Float64Array.from(start);
  const until = Float64Array.from(end);
  const local = (m: number, atS: number): number => {
    const cycleS = plan.cycleS[node[m]];
    const shifted = atS - plan.offsetS[node[m]];
    return shifted - Math.floor(shifted / cycleS) * cycleS;
  };
  return {
    nextGreenS(m, atS) {
      const inCycle = local(m, atS);
      if (inCycle >= from[m] && inCycle < until[m]) return atS;
      const waitS = from[m] - inCycle;
      return atS + (waitS > 0 ? waitS : waitS + plan.cycleS[node[m]]);
    },
    isPermitted: (m) => isPermitted[m] === 1,
    isClearing: (m, atS) => local(m, atS) >= until[m] - CLEARING_S,
  };
}
