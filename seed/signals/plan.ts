import type { City, CityNode } from "../network/types";
import { distanceM } from "../plane";
import { chooseCycleS, CYCLES_S, LOST_S, timeNode, type NodeTiming } from "./timing";

/** Fixed-time plan of one period, ready for the simulation: windows are seconds of the local cycle. */
export interface SignalPlan {
  timings: NodeTiming[];
  cycleS: Float64Array;
  offsetS: Float64Array;
  greenStartS: Float64Array;
  greenEndS: Float64Array;
  /** NaN where the movement has no permitted window. */
  permitStartS: Float64Array;
  permitEndS: Float64Array;
}

const PROGRESSION_SHARE = 0.92;
/** A junction that the corridor's cycle would overload runs its own. */
const MOST_SATURATION = 0.92;

/** Webster cycles, common along a corridor, with offsets for the busier direction. */
export function planSignals(city: City, flow: Float64Array): NodeTiming[] {
  const junctions = city.nodes.filter((node) => !node.isGate);
  const own = new Map(junctions.map((node) => [node.index, chooseCycleS(city, node, flow)]));
  const ownCycleS = (node: CityNode) => own.get(node.index) ?? CYCLES_S.shortest;
  const corridors = [...new Set(junctions.map((node) => node.corridor))];
  const timings: NodeTiming[] = [];
  for (const corridor of corridors) {
    const members = junctions.filter((node) => node.corridor === corridor).sort((a, b) => a.corridorOrder - b.corridorOrder);
    if (corridor === "") {
      for (const node of members) {
        const timing = timeNode(city, node, flow, ownCycleS(node));
        timings.push({ ...timing, offsetS: (node.index * 17) % timing.cycleS });
      }
      continue;
    }
    const sorted = members.map(ownCycleS).sort((a, b) => a - b);
    const cycleS = sorted[Math.floor((sorted.length - 1) * 0.85)];
    const chain = members.map((node) => {
      const timing = timeNode(city, node, flow, cycleS);
      return timing.saturation > MOST_SATURATION ? timeNode(city, node, flow, ownCycleS(node)) : timing;
    });
    setOffsets(city, members, chain, flow);
    timings.push(...chain);
  }
  return timings.sort((a, b) => a.node - b.node);
}

function linkBetween(city: City, from: CityNode, to: CityNode): number {
  return from.outbound.find((link) => city.links[link].to === to.index) ?? -1;
}

/** Second of the local cycle at which the street's through stage starts for traffic from a neighbour. */
export function throughStart(city: City, timing: NodeTiming, link: number): number {
  let at = 0;
  for (let i = 0; i < timing.stages.length; i++) {
    const serves = timing.stages[i].protected.some((m) => city.movements[m].from === link && city.movements[m].turn !== "left");
    if (serves) return at;
    at += timing.greensS[i] + LOST_S;
  }
  return 0;
}

function setOffsets(city: City, members: CityNode[], chain: NodeTiming[], flow: Float64Array): void {
  const throughFlow = (link: number) => (link < 0 ? 0 : city.movementsOf[link].reduce((sum, m) => sum + flow[m], 0));
  let balance = 0;
  for (let i = 1; i < members.length; i++) {
    balance += throughFlow(linkBetween(city, members[i - 1], members[i])) - throughFlow(linkBetween(city, members[i], members[i - 1]));
  }
  const order = members.map((_, i) => i);
  if (balance < 0) order.reverse();
  chain[order[0]].offsetS = (members[0].index * 13) % chain[order[0]].cycleS;
  for (let i = 1; i < order.length; i++) {
    const [before, here] = [chain[order[i - 1]], chain[order[i]]];
    const link = linkBetween(city, members[order[i - 1]], members[order[i]]);
    const lengthM = link < 0 ? distanceM(members[order[i - 1]].point, members[order[i]].point) : city.links[link].lengthM + 30;
    const travelS = lengthM / ((link < 0 ? 12 : city.links[link].speedMs) * PROGRESSION_SHARE);
    const upstream = linkBetween(city, members[order[i - 2]] ?? members[order[i - 1]], members[order[i - 1]]);
    const leaveS = before.offsetS + throughStart(city, before, upstream);
    const cycleS = here.cycleS;
    here.offsetS = (((leaveS + travelS - throughStart(city, here, link)) % cycleS) + cycleS) % cycleS;
  }
}

export function compilePlan(city: City, timings: NodeTiming[]): SignalPlan {
  const plan: SignalPlan = {
    timings,
    cycleS: new Float64Array(city.nodes.length).fill(NaN),
    offsetS: new Float64Array(city.nodes.length),
    greenStartS: new Float64Array(city.movements.length).fill(NaN),
    greenEndS: new Float64Array(city.movements.length).fill(NaN),
    permitStartS: new Float64Array(city.movements.length).fill(NaN),
    permitEndS: new Float64Array(city.movements.length).fill(NaN),
  };
  for (const timing of timings) {
    plan.cycleS[timing.node] = timing.cycleS;
    plan.offsetS[timing.node] = timing.offsetS;
    let at = 0;
    timing.stages.forEach((stage, i) => {
      const end = at + timing.greensS[i];
      for (const m of stage.protected) [plan.greenStartS[m], plan.greenEndS[m]] = [at, end];
      for (const m of stage.permitted) [plan.permitStartS[m], plan.permitEndS[m]] = [at, end];
      at = end + LOST_S;
    });
  }
  return plan;
}
