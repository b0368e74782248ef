import type { JunctionIndex } from "@/core/index/junction-index";
import { cleanPings } from "@/core/pings/clean";
import { createNearSampler, NEAR_SAMPLE } from "@/core/pings/near-sample";
import type { JunctionPoint, PingColumns, SampleFacts } from "@/core/types";
import type { PieceStore } from "./pieces/piece-store";
import { firstSlots, readSlots, type SlottedPings } from "./steps/ping-slots";

/** Enough vehicles to learn the streets from, for each junction and in all; the rest only passes over them. */
const LEARNING_PINGS_PER_JUNCTION = 2_000;
const LEAST_LEARNING_PINGS = 400_000;
const MOST_LEARNING_PINGS = 2_000_000;
/** Enough to tell how often vehicles speak. */
const FACTS_PINGS = 100_000;
/** So many times the wanted pings are let through where their number is known from a sample of the vehicles only. */
const CLOUD_ROOM = 1.5;
/** Fewer seen pings tell too little. */
const CLOUD_LEAST = 100;

/** Whole vehicles, always the same of a file, and what they tell of the rest. */
export interface LearningSample extends Pick<SampleFacts, "medianIntervalS" | "hasSpeed" | "hasHeading"> {
  pings: PingColumns;
  /** By junction: share of the file's pings that its sample may be drawn from. */
  cloudShare: Float64Array;
}

/** O(pings of the sample). */
export async function learningSample(store: PieceStore, objects: readonly SlottedPings[], junctions: readonly JunctionPoint[], index: JunctionIndex): Promise<LearningSample> {
  const wanted = Math.min(MOST_LEARNING_PINGS, Math.max(LEAST_LEARNING_PINGS, LEARNING_PINGS_PER_JUNCTION * junctions.length));
  const { ranges, pings: held } = firstSlots(objects, wanted);
  const total = objects.reduce((sum, object) => sum + object.pings.reduce((n, some) => n + some, 0), 0);
  const { pings } = await readSlots(store, ranges);
  const { medianIntervalS, hasSpeed, hasHeading } = cleanPings((await readSlots(store, firstSlots(objects, FACTS_PINGS).ranges)).pings).trips;
  return { pings, cloudShare: shareOf(junctions, index, pings, held / total), medianIntervalS, hasSpeed, hasHeading };
}

/** Of many pings near a junction only a share can be among those that are kept: the others need not be looked at. */
function shareOf(junctions: readonly JunctionPoint[], index: JunctionIndex, pings: PingColumns, part: number): Float64Array {
  const most = NEAR_SAMPLE.most;
  if (part === 1) return new Float64Array(junctions.length).fill(1);
  const sampler = createNearSampler(junctions, index, { most: Math.ceil(CLOUD_ROOM * most * part) + CLOUD_LEAST });
  sampler.add(pings);
  return Float64Array.from(sampler.finish(), ({ length, priority }) => {
    const wanted = Math.ceil(CLOUD_ROOM * most * part);
    return length > Math.max(wanted, CLOUD_LEAST) ? priority[Math.max(wanted, CLOUD_LEAST)] : 1;
  });
}
