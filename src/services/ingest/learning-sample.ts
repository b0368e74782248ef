import type { JunctionIndex } from "@/core/index/junction-index";
import { learningPings } from "@/core/legs/learning";
import { nearShare } from "@/core/legs/learning-sample";
import { cleanPings } from "@/core/pings/clean";
import type { JunctionPoint, PingColumns, SampleFacts } from "@/core/types";
import type { PieceStore } from "./pieces/piece-store";
import { firstSlots, readSlots, type SlottedPings } from "./steps/ping-slots";

/** Of a city with more junctions than these suffice for, one file teaches less, and the next ones go on from there: it is memory that is bounded. */
const MOST_LEARNING_PINGS = 4_000_000;
/** Enough to tell how often vehicles speak, and how many of them are near junctions. */
const FACTS_PINGS = 100_000;

/** Whole vehicles, always the same of a file, and what they tell of the rest. */
export interface LearningSample extends Pick<SampleFacts, "medianIntervalS" | "hasSpeed" | "hasHeading"> {
  pings: PingColumns;
  /** It holds the vehicles of so many slots. */
  slots: number;
}

/** O(pings of the sample). */
export async function learningSample(store: PieceStore, objects: readonly SlottedPings[], junctions: readonly JunctionPoint[], index: JunctionIndex): Promise<LearningSample> {
  const some = (await readSlots(store, firstSlots(objects, FACTS_PINGS).ranges)).pings;
  const { medianIntervalS, hasSpeed, hasHeading } = cleanPings(some).trips;
  const wanted = Math.min(MOST_LEARNING_PINGS, learningPings(junctions.length, medianIntervalS) / nearShare(some, junctions, index));
  const { ranges, slots } = firstSlots(objects, wanted);
  const { pings } = await readSlots(store, ranges);
  return { pings, slots, medianIntervalS, hasSpeed, hasHeading };
}
