import { DEFAULT_QUEUE_OPTIONS } from "@/core/queues/options";
import { placeSums } from "@/core/queues/penetration";
import { presenceByLeg, quartersSeen, type Presence } from "@/core/queues/presence";
import { findStandings, standingsByLeg, type Standings } from "@/core/queues/standings";
import { columnSums } from "@/core/queues/unseen-tail";
import { buildScreenDays } from "@/core/scores/build-screen-days";
import { localQuarter } from "@/core/scores/local-time";
import { encodeScreenDay } from "@/core/scores/screen-day-codec";
import type { ScreenDay } from "@/core/scores/types";
import { setDelays } from "@/core/traversals/references";
import type { LegQuarters, Network, OpenTracks, Traversals } from "@/core/types";
import type { OffsetSpan } from "@/domain/local-time";
import type { ByteRange } from "@/storage/storage";
import { joinTraversals, pickOpenTracks, pickTraversals } from "../join-traversals";
import { dropKnown } from "../known-traversals";
import type { NetworkKeys } from "../network-rows";
import type { Bench, PieceKind } from "../pieces/piece-kind";
import type { PieceStore } from "../pieces/piece-store";
import { encodeRecord, recordsIn } from "../pieces/records";
import { remembered } from "../pieces/remembered";
import { encodeTraversals } from "../store-traversals";
import type { LegPart } from "./match-vehicles";

/** The network with its references, and the keys that its rows have or will have. */
export interface Scene {
  network: Network;
  keys: NetworkKeys;
}

/** Some bytes of an object. */
export interface ObjectRange extends ByteRange {
  name: string;
}

export interface LegsToTally {
  /** Object that holds a `Scene`. */
  scene: string;
  uploadId: string;
  /** Every part of these legs. */
  parts: ObjectRange[];
  legs: { from: number; to: number };
  localTime: OffsetSpan[];
}

/** One local day's slice of some legs. */
export interface DaySlice extends ObjectRange {
  day: number;
}

export interface LegsTallied {
  legs: { from: number; to: number };
  matched: number;
  /** Those that no other upload has brought. */
  traversals: number;
  /** Local days with their numbers of traversals. */
  days: { day: number; traversals: number }[];
  slices: DaySlice[];
  /** Object with the rows as the database takes them. */
  rows: string;
  /** Object with what the quarters of these legs rest on. */
  queues: string;
  seenQuarters: Float64Array;
  /** From here on by leg, from the first of these legs. */
  used: Uint8Array;
  columns: { ahead: Float64Array; reachM: Float64Array };
  places: { ahead: Float64Array; places: Float64Array };
}

export interface LegQueues {
  standings: Standings;
  presence: Presence;
}

const NO_QUARTERS: LegQuarters = {
  length: 0,
  leg: new Uint32Array(0),
  startMs: new Float64Array(0),
  reachM: new Float32Array(0),
  reachEstimateM: new Float32Array(0),
  spilledS: new Float32Array(0),
  observedS: new Float32Array(0),
};

export const tallyLegs: PieceKind<LegsToTally, LegsTallied> = {
  name: "tally legs",
  async work(bench, input) {
    const scene = await remembered(bench.store, input.scene, "scene", (value: Scene) => value);
    const { network, keys } = scene;
    const all = joined(network, await partsOf(bench.store, input.parts));
    setDelays(network, all.traversals);
    const days = daysOf(all.traversals, input.localTime);
    const legKeys = keys.legs.subarray(input.legs.from, input.legs.to);
    const traversals = await dropKnown(bench.db, all.traversals, { uploadId: input.uploadId, network, keys, legKeys, days: new Set(days), vehicleHash: all.hash });

    const localDay = daysOf(traversals, input.localTime);
    const rows = `${bench.name}.rows`;
    await bench.store.put(rows, encodeTraversals({ uploadId: input.uploadId, network, keys, traversals, localDay, vehicleHash: all.hash }));
    // The lower halves of the hashes.
    const vehicle = picked(new Uint32Array(all.hash.buffer), indices(all.hash.length).map((i) => 2 * i));
    const slices = await putSlices(bench, buildScreenDays(traversals, NO_QUARTERS, { movement: keys.movements, leg: keys.legs, vehicle }, input.localTime));
    return {
      legs: input.legs,
      matched: all.traversals.length,
      traversals: traversals.length,
      days: countDays(localDay),
      slices,
      rows,
      ...(await tallyQueues(bench, network, traversals, all.open, input.legs)),
    };
  },
};

async function partsOf(store: PieceStore, ranges: readonly ObjectRange[]): Promise<LegPart[]> {
  const parts: LegPart[] = [];
  for (const { name, from, to } of ranges) if (to > from) parts.push(...recordsIn<LegPart>(await store.read(name, { from, to })));
  return parts;
}

/** In an order that does not depend on which vehicles were matched together. */
function joined(network: Network, parts: LegPart[]): LegPart {
  const traversals = joinTraversals(parts.map((part) => part.traversals));
  const hash = new BigInt64Array(traversals.length);
  let at = 0;
  for (const part of parts) {
    hash.set(part.hash, at);
    at += part.hash.length;
  }
  const leg = traversals.movement.map((movement) => network.movements[movement].leg);
  const { stopLineMs, enterMs } = traversals;
  const byHash = (a: number, b: number) => (hash[a] < hash[b] ? -1 : hash[a] > hash[b] ? 1 : 0);
  const order = indices(traversals.length).sort((a, b) => leg[a] - leg[b] || stopLineMs[a] - stopLineMs[b] || byHash(a, b) || enterMs[a] - enterMs[b]);
  const sorted = pickTraversals(traversals, order);
  sorted.vehicle.set(indices(sorted.length));
  const sortedHash = new BigInt64Array(order.length);
  for (let k = 0; k < order.length; k++) sortedHash[k] = hash[order[k]];
  return { traversals: sorted, hash: sortedHash, open: joinedOpen(parts.map((part) => part.open)) };
}

function joinedOpen(parts: OpenTracks[]): OpenTracks {
  const sizes = parts.map((part) => part.length);
  const places = parts.flatMap((part, p) => Array.from({ length: sizes[p] }, (_, i) => ({ part, i })));
  const firstS = (t: { part: OpenTracks; i: number }) => t.part.trackS[t.part.trackOffset[t.i]];
  places.sort((a, b) => a.part.leg[a.i] - b.part.leg[b.i] || a.part.enterMs[a.i] - b.part.enterMs[b.i] || firstS(a) - firstS(b));
  const whole = concatOpen(parts);
  const starts = new Map<OpenTracks, number>();
  let at = 0;
  parts.forEach((part, p) => {
    starts.set(part, at);
    at += sizes[p];
  });
  return pickOpenTracks(whole, places.map(({ part, i }) => (starts.get(part) as number) + i));
}

function concatOpen(parts: readonly OpenTracks[]): OpenTracks {
  const length = parts.reduce((sum, part) => sum + part.length, 0);
  const points = parts.reduce((sum, part) => sum + part.trackT.length, 0);
  const all: OpenTracks = {
    length,
    leg: new Uint32Array(length),
    vehicle: new Uint32Array(length),
    enterMs: new Float64Array(length),
    trackOffset: new Uint32Array(length + 1),
    trackT: new Float32Array(points),
    trackS: new Float32Array(points),
  };
  let at = 0;
  let point = 0;
  for (const part of parts) {
    all.leg.set(part.leg, at);
    all.vehicle.set(part.vehicle, at);
    all.enterMs.set(part.enterMs, at);
    for (let i = 0; i < part.length; i++) all.trackOffset[at + i + 1] = point + part.trackOffset[i + 1];
    all.trackT.set(part.trackT, point);
    all.trackS.set(part.trackS, point);
    at += part.length;
    point += part.trackT.length;
  }
  return all;
}

function indices(length: number): Uint32Array {
  const all = new Uint32Array(length);
  for (let i = 0; i < length; i++) all[i] = i;
  return all;
}

/** Much faster than the `from` of typed arrays. */
function picked<T extends Float64Array | Float32Array | Uint8Array | Uint32Array>(from: T, rows: Uint32Array): T {
  const to = new (from.constructor as new (length: number) => T)(rows.length);
  for (let k = 0; k < rows.length; k++) to[k] = from[rows[k]];
  return to;
}

function daysOf(all: Traversals, localTime: readonly OffsetSpan[]): Int32Array {
  const days = new Int32Array(all.length);
  for (let i = 0; i < all.length; i++) days[i] = localQuarter(all.stopLineMs[i], localTime).day;
  return days;
}

function countDays(localDay: Int32Array): LegsTallied["days"] {
  const counts = new Map<number, number>();
  for (const day of localDay) counts.set(day, (counts.get(day) ?? 0) + 1);
  return [...counts].map(([day, traversals]) => ({ day, traversals }));
}

/** Writes slices one behind the other. */
export async function putSlices(bench: Bench, days: readonly ScreenDay[]): Promise<DaySlice[]> {
  const name = `${bench.name}.slices`;
  const encoded = days.map(encodeScreenDay);
  await bench.store.put(name, encoded);
  let from = 0;
  return days.map(({ day }, i) => {
    const range = { name, day, from, to: from + encoded[i].length };
    from = range.to;
    return range;
  });
}

async function tallyQueues(bench: Bench, network: Network, traversals: Traversals, open: OpenTracks, { from, to }: LegsToTally["legs"]) {
  const options = DEFAULT_QUEUE_OPTIONS;
  const legs = network.legs.length;
  const standings = findStandings(network, traversals, options, open);
  const presence = presenceByLeg(network, traversals, standings, options, open);
  const queues = `${bench.name}.queues`;
  const stored: LegQueues = { standings, presence };
  await bench.store.put(queues, [encodeRecord(stored)]);
  const passed = ofTraversals(standings, traversals.length);
  const columns = columnSums(standings, standingsByLeg(standings, legs), options);
  const places = placeSums(passed, standingsByLeg(passed, legs), options);
  const used = new Uint8Array(to - from);
  for (const movement of traversals.movement) used[network.movements[movement].leg - from] = 1;
  return {
    queues,
    seenQuarters: Float64Array.from(quartersSeen(presence)),
    used,
    columns: { ahead: columns.ahead.slice(from, to), reachM: columns.reachM.slice(from, to) },
    places: { ahead: places.ahead.slice(from, to), places: places.places.slice(from, to) },
  };
}

/** Without those of open tracks, which count on behind the traversals. */
function ofTraversals(all: Standings, traversals: number): Standings {
  const chosen = indices(all.length).filter((k) => all.traversal[k] < traversals);
  return {
    length: chosen.length,
    leg: picked(all.leg, chosen),
    traversal: picked(all.traversal, chosen),
    s: picked(all.s, chosen),
    fromMs: picked(all.fromMs, chosen),
    toMs: picked(all.toMs, chosen),
    joinedMs: picked(all.joinedMs, chosen),
    isQueuing: picked(all.isQueuing, chosen),
    doubtM: picked(all.doubtM, chosen),
  };
}
