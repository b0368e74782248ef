import type { City } from "../network/types";
import type { SignalPlan } from "../signals/plan";
import { TURN_BIT, type LaneMap } from "./lanes";

/** By movement: the lanes whose through and right vehicles a permitted left must let pass. */
export function opposingLanes(city: City, plan: SignalPlan, map: LaneMap): number[][] {
  const lanes: number[][] = city.movements.map(() => []);
  const goesOn = (lane: number) => (map.lanes[lane].turns & (TURN_BIT.through | TURN_BIT.right)) !== 0;
  for (const stage of plan.timings.flatMap((timing) => timing.stages)) {
    for (const left of stage.permitted) {
      const own = city.movements[left].from;
      const links = new Set(stage.protected.map((m) => city.movements[m].from).filter((link) => link !== own));
      for (const link of links) lanes[left].push(...map.lastOf[link].filter(goesOn));
    }
  }
  return lanes;
}
