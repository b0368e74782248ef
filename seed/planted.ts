import type { CityScale } from "./network/build-city";
import type { City } from "./network/types";
import type { Period } from "./demand/pattern";
import { turnDeg } from "./plane";

export type FaultKind = "starved-left" | "bad-offset" | "spillback-chain" | "oversaturated" | "noisy";

/** A problem put into the city on purpose, so that one can check that it comes out where it was put. */
export interface PlantedProblem {
  kind: FaultKind;
  junctionId: string;
  /** Direction of travel of the leg concerned; NaN for all legs. */
  approachBearingDeg: number;
  turn: "left" | "through" | "all";
  period: Period;
  /** Local time between which it shows on weekdays, minutes after midnight. */
  fromMin: number;
  untilMin: number;
  /** Stages are timed to this degree of saturation at the height of the period. */
  saturation?: number;
  /** Share of the cycle by which the offset is wrong. */
  offsetShift?: number;
  /** Further junctions that the queue reaches, next one upstream first. */
  upstreamIds?: string[];
  expectation: string;
}

const PM = { period: "pm", fromMin: 990, untilMin: 1080 } as const;

export const PLANTED: Record<CityScale, PlantedProblem[]> = {
  demo: [
    {
      ...PM, kind: "starved-left", junctionId: "VM054", approachBearingDeg: 325, turn: "left", saturation: 1.05,
      expectation: "The left turn from Tidewater Road gets too little green: mean delay above 80 s while the through movement beside it stays below 55 s; its queue fills the bay.",
    },
    {
      ...PM, kind: "bad-offset", junctionId: "VM030", approachBearingDeg: 83, turn: "through",
      offsetShift: 0.6,
      expectation: "Out of step with its neighbours: platoons going east on Coast Road arrive on red. Mean delay of the through movement above 22 s; in step it would be below 10 s.",
    },
    {
      ...PM, kind: "spillback-chain", junctionId: "VM126", approachBearingDeg: 189, turn: "through", saturation: 1.19, upstreamIds: ["VM127", "VM128"],
      expectation: "Harbour Road outbound cannot discharge at Quay Street: the queue fills the block and stands back through the two junctions behind.",
    },
    {
      ...PM, kind: "oversaturated", junctionId: "VM002", approachBearingDeg: NaN, turn: "all", saturation: 1.03,
      expectation: "A long pedestrian stage leaves every leg short of green: mean delay of the junction above 80 s, level of service F on most legs.",
    },
    {
      ...PM, kind: "noisy", junctionId: "VM264", approachBearingDeg: NaN, turn: "all",
      expectation: "Fine, but seen by few vehicles and with poor positions: wide intervals, thin evidence, must not be ranked near the top.",
    },
  ],
  small: [
    {
      ...PM, kind: "starved-left", junctionId: "VM130", approachBearingDeg: 10, turn: "left", saturation: 0.88,
      expectation: "The left turn from Harbour Road gets too little green: mean delay above 50 s.",
    },
    {
      ...PM, kind: "bad-offset", junctionId: "VM138", approachBearingDeg: 185, turn: "through", offsetShift: 0.67,
      expectation: "Out of step with Harbour Road: platoons that come over the bridge arrive on red. Mean delay of the through movement above 22 s; in step it would be below 13 s.",
    },
    {
      ...PM, kind: "spillback-chain", junctionId: "VM126", approachBearingDeg: 189, turn: "through", saturation: 1.07, upstreamIds: ["VM127", "VM128"],
      expectation: "Harbour Road outbound cannot discharge at Quay Street: the queue fills the block and stands back through the two junctions behind.",
    },
    {
      ...PM, kind: "oversaturated", junctionId: "VM104", approachBearingDeg: NaN, turn: "all", saturation: 0.95,
      expectation: "A long pedestrian stage leaves every leg short of green: mean delay of the junction above 50 s.",
    },
    {
      ...PM, kind: "noisy", junctionId: "VM174", approachBearingDeg: NaN, turn: "all",
      expectation: "Fine, but seen by few vehicles and with poor positions: thin evidence, must not be ranked near the top.",
    },
  ],
};

/** Index of the node with this identifier; throws for an unknown one. */
export function nodeById(city: City, id: string): number {
  const index = city.nodes.findIndex((node) => node.id === id);
  if (index < 0) throw new RangeError(`The city has no junction ${id}.`);
  return index;
}

/** The inbound link of a junction whose vehicles reach the stop line on this bearing. */
export function legByBearing(city: City, node: number, approachBearingDeg: number): number {
  const offDeg = (link: number) => Math.abs(turnDeg(approachBearingDeg, city.links[link].endBearingDeg));
  const leg = city.nodes[node].inbound.reduce((best, link) => (offDeg(link) < offDeg(best) ? link : best));
  if (offDeg(leg) > 20) throw new RangeError(`Junction ${city.nodes[node].id} has no leg on bearing ${approachBearingDeg}.`);
  return leg;
}

/** Share of its ordinary traffic that a junction planted as noisy keeps: few vehicles are seen there. */
export const QUIET_SHARE = 0.25;
/** Within this distance of it positions are worse by this factor. */
export const BLUR = { withinM: 150, factor: 2.2 } as const;
