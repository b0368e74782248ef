import type { JunctionIndex } from "@/core/index/junction-index";
import { learningPings } from "@/core/legs/learning";
import { nearShare } from "@/core/legs/learning-sample";
import { cleanPings } from "@/core/pings/clean";
import { createNearSampler, NEAR_SAMPLE } from "@/core/pings/near-sample";
import type { JunctionPoint, PingColumns, SampleFacts } from "@/core/types";
import type { PieceStore } from "./pieces/piece-store";
import { firstSlots, readSlots, type SlottedPings } from "./steps/ping-slots";

/** Of a city with more junctions than these suffice for, one file teaches less, and the next ones go on from there: it is memory that is bounded. */
const MOST_LEARNING_PINGS = 4_000_000;
/** Enough to tell how often vehicles speak, and how many of them are near junctions. */
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
  const some = (await readSlots(store, firstSlots(objects, FACTS_PINGS).ranges)).pings;
  const { medianIntervalS, hasSpeed, hasHeading } = cleanPings(some).trips;
  const wanted = Math.min(MOST_LEARNING_PINGS, learningPings(junctions.length, medianIntervalS) / nearShare(some, junctions, index));
  const { ranges, pings: held } = firstSlots(objects, wanted);
  const total = objects.reduce((sum, object) => sum + object.pings.reduce((n, pings) => n + pings, 0), 0);
  const { pings } = await readSlots(store, ranges);
  return { pings, cloudShare: shareOf(junctions, index, pings, held / total), medianIntervalS, hasSpeed, hasHeading };
}

/** Of many pings near a junction only a share can be among those that are kept: the others need not be looked at. */
function shareOf(junctions: readonly JunctionPoint[], index: JunctionIndex, pings: PingColumns, part: number): Float64Array {
  if (part === 1) return new Float64Array(junctions.length).fill(1);
  const wanted = Math.max(CLOUD_LEAST, Math.ceil(CLOUD_ROOM * NEAR_SAMPLE.most * part));
  const sampler = createNearSampler(junctions, index, { most: wanted + 1 });
  sampler.add(pings);
  return Float64Array.from(sampler.finish(), ({ length, priority }) => (length > wanted ? priority[wanted] : 1));
}
