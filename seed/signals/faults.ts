import type { City } from "../network/types";
import { legByBearing, nodeById, type PlantedProblem } from "../planted";
import { LOST_S, type NodeTiming } from "./timing";

/** Spoils the timings where problems are planted in this plan. */
export function plantFaults(city: City, timings: NodeTiming[], problems: PlantedProblem[], flow: Float64Array): void {
  for (const problem of problems) {
    const node = nodeById(city, problem.junctionId);
    const timing = timings.find((candidate) => candidate.node === node);
    if (!timing) continue;
    switch (problem.kind) {
      case "starved-left":
      case "spillback-chain":
        starve(city, timing, problem, flow);
        break;
      case "bad-offset":
        timing.offsetS = (timing.offsetS + timing.cycleS * (problem.offsetShift ?? 0.5)) % timing.cycleS;
        break;
      case "oversaturated":
        holdAllLegs(timing, problem.saturation ?? 1);
        break;
      case "noisy":
        break;
      default:
        problem.kind satisfies never;
    }
  }
}

const LANE_SATURATION_VEH_H = 1700;

/** Cuts the green that a leg's movement needs down to the wanted degree of saturation; the others share what is won. */
function starve(city: City, timing: NodeTiming, problem: PlantedProblem, flow: Float64Array): void {
  const leg = legByBearing(city, timing.node, problem.approachBearingDeg);
  const isLeft = problem.turn === "left";
  const own = city.movementsOf[leg].filter((m) => (city.movements[m].turn === "left") === isLeft);
  const stage = timing.stages.findIndex((candidate) => own.some((m) => candidate.protected.includes(m)));
  if (stage < 0) throw new RangeError(`Junction ${problem.junctionId} gives the planted movement no green of its own.`);
  const lanes = isLeft ? 1 : Math.min(city.links[leg].lanes * 0.95, 1.9);
  const flowVehH = own.reduce((sum, m) => sum + flow[m], 0);
  const neededS = ((flowVehH / (LANE_SATURATION_VEH_H * lanes)) * timing.cycleS) / (problem.saturation ?? 1);
  const wonS = timing.greensS[stage] - neededS;
  timing.greensS[stage] = neededS;
  timing.greensS.forEach((_, i) => {
    if (i !== stage) timing.greensS[i] += wonS / (timing.greensS.length - 1);
  });
}

/** Adds a stage in which nobody drives and shrinks the others until each is as saturated as wanted. */
function holdAllLegs(timing: NodeTiming, saturation: number): void {
  const greensS = timing.greensS.map((greenS, i) => Math.min(greenS, (timing.ratios[i] * timing.cycleS) / saturation));
  const used = greensS.reduce((sum, greenS) => sum + greenS + LOST_S, 0);
  timing.greensS = [...greensS, Math.max(0, timing.cycleS - used - LOST_S)];
  timing.stages = [...timing.stages, { protected: [], permitted: [] }];
}
