import { websterCycleS } from "@/core/models/webster-delay";
import type { City, CityNode } from "../network/types";
import { gapCapacityVehH, stagesOf, type Stage } from "./stages";

/** Yellow, red clearance and start-up lost with every stage. */
export const LOST_S = 5;
export const YELLOW_S = 3;
const SATURATION_VEH_H = 1750;
const LEFT_MIN_S = 7;
const STAGE_MIN_S = 13;
/** A left that waits for gaps in a shared lane takes the room of at most so many through vehicles. */
const MOST_EQUIVALENTS = 8;

export interface NodeTiming {
  node: number;
  cycleS: number;
  offsetS: number;
  stages: Stage[];
  /** Flow ratio of each stage, in order. */
  ratios: number[];
  /** Effective green of each stage. */
  greensS: number[];
  /** Highest degree of saturation of any stage. */
  saturation: number;
}

/** Flow ratio of each stage: its busiest lane group's flow over saturation flow. */
export function stageRatios(city: City, stages: Stage[], flow: Float64Array): number[] {
  return stages.map((stage) => {
    const legs = [...new Set([...stage.protected, ...stage.permitted].map((m) => city.movements[m].from))];
    return legs.reduce((worst, leg) => Math.max(worst, legRatio(city, leg, stage, flow)), 0.02);
  });
}

/** The fullest lane of a leg: lefts in their bay, through vehicles over the lanes that also go on past the junction. */
function legRatio(city: City, leg: number, stage: Stage, flow: Float64Array): number {
  const link = city.links[leg];
  const sum = { left: 0, through: 0, right: 0 };
  let throughLanes = 1;
  const add = (m: number, weight: number) => {
    const movement = city.movements[m];
    if (movement.from !== leg) return;
    sum[movement.turn] += flow[m] * weight;
    if (movement.turn === "through") throughLanes = Math.min(link.lanes, city.links[movement.to].lanes);
  };
  stage.protected.forEach((m) => add(m, 1));
  for (const m of stage.permitted) {
    if (link.bayM > 0 || city.movements[m].from !== leg) continue;
    add(m, Math.min(MOST_EQUIVALENTS, SATURATION_VEH_H / gapCapacityVehH(city, m, stage.protected, flow) + 0.5));
  }
  const others = sum.through + sum.right + (link.bayM > 0 ? 0 : sum.left);
  const spread = link.lanes > 1 && sum.through > 0 ? 1.8 : 1;
  const turning = link.bayM > 0 || link.lanes > 1 ? Math.max(sum.left, sum.right) : sum.right;
  return Math.max(others / spread, sum.through / (throughLanes * 0.95), turning * 1.08) / SATURATION_VEH_H;
}

/** Webster's near-optimal cycle; flow ratios that sum up to more than can be served are taken for the most that can. */
export function cycleOfStagesS(ratios: number[]): number {
  const total = Math.min(0.9, ratios.reduce((sum, ratio) => sum + ratio, 0));
  return websterCycleS(LOST_S * ratios.length, total);
}

export function timeNode(city: City, node: CityNode, flow: Float64Array, cycleS: number): NodeTiming {
  const stages = stagesOf(city, node, flow);
  const ratios = stageRatios(city, stages, flow);
  const minimum = stages.map((stage) => (stage.protected.every((m) => city.movements[m].turn === "left") ? LEFT_MIN_S : STAGE_MIN_S));
  const cycle = Math.max(cycleS, minimum.reduce((sum, s) => sum + s + LOST_S, 0));
  const greensS = shareGreen(cycle - LOST_S * stages.length, ratios, minimum);
  const saturation = greensS.reduce((worst, greenS, i) => Math.max(worst, (ratios[i] * cycle) / greenS), 0);
  return { node: node.index, cycleS: cycle, offsetS: 0, stages, ratios, saturation, greensS };
}

const WANTED_SATURATION = 0.82;
/** Somewhat longer than the optimum costs little (Webster's near-optimal band) and rides out chance peaks. */
const WEBSTER_ALLOWANCE = 1.3;
export const CYCLES_S = { shortest: 75, longest: 120, step: 5 };

/** The shorter of the cycles that keep every stage below the wanted degree of saturation, but not below Webster's. */
export function chooseCycleS(city: City, node: CityNode, flow: Float64Array): number {
  const first = timeNode(city, node, flow, CYCLES_S.shortest);
  const websterS = Math.round((WEBSTER_ALLOWANCE * cycleOfStagesS(first.ratios)) / CYCLES_S.step) * CYCLES_S.step;
  let cycleS = Math.min(CYCLES_S.longest, Math.max(CYCLES_S.shortest, websterS));
  while (cycleS < CYCLES_S.longest && timeNode(city, node, flow, cycleS).saturation > WANTED_SATURATION) cycleS += CYCLES_S.step;
  return cycleS;
}

/** Shares seconds in proportion to the ratios; whoever would fall below the minimum gets the minimum. */
export function shareGreen(secondsS: number, ratios: number[], minimum: number[]): number[] {
  const greens = ratios.map(() => 0);
  let free = ratios.map((_, i) => i);
  let leftS = secondsS;
  for (;;) {
    const total = free.reduce((sum, i) => sum + ratios[i], 0);
    const short = free.filter((i) => (leftS * ratios[i]) / total < minimum[i]);
    if (short.length === 0) {
      free.forEach((i) => (greens[i] = (leftS * ratios[i]) / total));
      return greens;
    }
    for (const i of short) {
      greens[i] = minimum[i];
      leftS -= minimum[i];
    }
    free = free.filter((i) => !short.includes(i));
    if (free.length === 0) return greens;
  }
}
