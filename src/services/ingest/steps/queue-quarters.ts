import { quartersOfLegs } from "@/core/queues/leg-quarters";
import { buildScreenDays } from "@/core/scores/build-screen-days";
import type { OffsetSpan } from "@/domain/local-time";
import { emptyTraversals } from "../join-traversals";
import type { PieceKind } from "../pieces/piece-kind";
import { decodeRecord } from "../pieces/records";
import { remembered } from "../pieces/remembered";
import { putSlices, type DaySlice, type LegQueues, type Scene } from "./tally-legs";

/** What the quarters of every leg need to know of the whole city. */
export interface CityQueues {
  /** Seen vehicles per metre of standing column, by leg. */
  perMetre: Float64Array;
  /** Starts of the quarters in which any vehicle came on any leg. */
  seenQuarters: ReadonlySet<number>;
}

export interface QueuesToScore {
  scene: string;
  /** Object that holds `CityQueues`. */
  city: string;
  /** Object that holds `LegQueues`. */
  queues: string;
  localTime: OffsetSpan[];
}

export const queueQuarters: PieceKind<QueuesToScore, DaySlice[]> = {
  name: "queue quarters",
  async work(bench, input) {
    const { network, keys } = await remembered(bench.store, input.scene, "scene", (value: Scene) => value);
    const city = await remembered(bench.store, input.city, "city", (value: CityQueues) => value);
    const queues = decodeRecord<LegQueues>(await bench.store.read(input.queues));
    const quarters = quartersOfLegs(network, { ...queues, ...city });
    return putSlices(bench, buildScreenDays(emptyTraversals(0, 0), quarters, { movement: keys.movements, leg: keys.legs, vehicle: [] }, input.localTime));
  },
};
