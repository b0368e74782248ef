import { turnDeg } from "../plane";
import type { City, CityLink, CityNode } from "../network/types";

/** Movements that have green together. */
export interface Stage {
  /** Have right of way. */
  protected: number[];
  /** Lefts that wait for gaps in the opposing stream. */
  permitted: number[];
}

/** A left turn that would need more than this share of what gaps give gets a green of its own. */
const PERMITTED_SHARE = 0.5;
const GREEN_SHARE = 0.35;
/** On wide streets lefts are kept from crossing two lanes by gaps once there are this many an hour. */
const WIDE_LEFT_VEH_H = 40;
const CRITICAL_GAP_S = 4.8;
const FOLLOW_UP_S = 2.2;
/** Vehicles that complete their turn as the green ends, per hour. */
const CLEARING_VEH_H = 60;

/** Opposing legs go together, any other leg alone; lefts out of a bay go first where they would find no gaps. */
export function stagesOf(city: City, node: CityNode, flow: Float64Array): Stage[] {
  const stages: Stage[] = [];
  for (const legs of opposingPairs(node, city.links)) {
    const movements = legs.flatMap((leg) => city.movementsOf[leg]);
    if (legs.length === 1) {
      stages.push({ protected: movements, permitted: [] });
      continue;
    }
    const lefts = movements.filter((m) => city.movements[m].turn === "left");
    const needy = lefts.filter((m) => needsOwnGreen(city, m, movements, flow));
    if (needy.some((m) => city.links[city.movements[m].from].bayM === 0)) {
      for (const leg of legs) stages.push({ protected: city.movementsOf[leg].slice(), permitted: [] });
      continue;
    }
    const ownStage = needy.length > 0 ? lefts.filter((m) => city.links[city.movements[m].from].bayM > 0) : [];
    if (ownStage.length > 0) stages.push({ protected: ownStage, permitted: [] });
    stages.push({
      protected: movements.filter((m) => city.movements[m].turn !== "left"),
      permitted: lefts.filter((m) => !ownStage.includes(m)),
    });
  }
  return stages;
}

/**
 * Vehicles an hour that find gaps in the opposing through and right stream while it flows
 * (gap acceptance, Harders 1968), over the whole of the green.
 */
export function gapCapacityVehH(city: City, left: number, movements: number[], flow: Float64Array): number {
  const own = city.movements[left].from;
  let opposingVehH = 1;
  for (const m of movements) {
    const movement = city.movements[m];
    if (movement.from !== own && movement.turn !== "left") opposingVehH += flow[m];
  }
  const perSecond = opposingVehH / 3600 / GREEN_SHARE;
  return (3600 * perSecond * Math.exp(-perSecond * CRITICAL_GAP_S)) / (1 - Math.exp(-perSecond * FOLLOW_UP_S));
}

function needsOwnGreen(city: City, left: number, movements: number[], flow: Float64Array): boolean {
  const own = city.movements[left].from;
  const lefts = movements.reduce((sum, m) => (city.movements[m].from === own && city.movements[m].turn === "left" ? sum + flow[m] : sum), 0);
  const link = city.links[own];
  if (link.lanes > 1 && link.bayM > 0 && lefts > WIDE_LEFT_VEH_H) return true;
  return lefts > PERMITTED_SHARE * (GREEN_SHARE * gapCapacityVehH(city, left, movements, flow) + CLEARING_VEH_H);
}

/** Inbound links in pairs that face each other; a link without a counterpart stands alone. */
export function opposingPairs(node: CityNode, links: CityLink[]): number[][] {
  const left = node.inbound.slice();
  const pairs: number[][] = [];
  while (left.length > 0) {
    const leg = left.shift() as number;
    let best = -1;
    let bestDeg = 40;
    left.forEach((other, i) => {
      const offDeg = Math.abs(turnDeg(links[leg].endBearingDeg + 180, links[other].endBearingDeg));
      if (offDeg < bestDeg) [best, bestDeg] = [i, offDeg];
    });
    pairs.push(best < 0 ? [leg] : [leg, left.splice(best, 1)[0]]);
  }
  return pairs;
}
