import { createNearSampler, type NearSample, type NearSampler } from "@/core/pings/near-sample";
import { createMatcher, type Matched } from "@/core/process";
import { gatherUnhindered } from "@/core/traversals/references";
import type { Network, OpenTracks, PingColumns, Traversals } from "@/core/types";
import { createH3Index } from "@/geo/h3-index";
import { filterTraversals, pickOpenTracks, pickTraversals } from "../join-traversals";
import type { PieceKind } from "../pieces/piece-kind";
import { lengthAndRecord, offsetsOf } from "../pieces/records";
import { remembered } from "../pieces/remembered";
import { readSlots, type SlotRange } from "./ping-slots";

export interface VehiclesToMatch {
  /** Object that holds the network. */
  network: string;
  vehicles: SlotRange[];
  /** 1 for each leg whose traversals are wanted; all where null. */
  wanted: Uint8Array | null;
  /** By junction: share of its pings that may be among its sample; no sample where null. */
  cloudShare: Float64Array | null;
}

export interface Totals {
  pings: number;
  duplicates: number;
  jumps: number;
  trips: number;
  incompleteTraversals: number;
}

/** What was matched, a section for each slice of the legs. */
export interface VehiclesMatched {
  name: string;
  /** Bytes at which each slice begins and the last one ends. */
  offsets: number[];
  totals: Totals;
  vehicles: number;
  firstMs: number;
  lastMs: number;
  /** Seconds of unhindered traversals, one movement after the other. */
  unhindered: { counts: Uint32Array; seconds: Float64Array };
  clouds: NearSample[] | null;
}

/** A section: traversals whose vehicle is their own index, with the keyed hash of each. */
export interface LegPart {
  traversals: Traversals;
  hash: BigInt64Array;
  open: OpenTracks;
}

const MOST_SLICES = 512;

/** Legs go into slices by their index, each a run of legs. */
export function sliceOfLeg(network: Network): { slices: number; of(leg: number): number } {
  const legs = network.legs.length;
  const slices = Math.min(MOST_SLICES, legs);
  return { slices, of: (leg) => Math.floor((leg * slices) / legs) };
}

export const matchVehicles: PieceKind<VehiclesToMatch, VehiclesMatched> = {
  name: "match vehicles",
  async work(bench, input) {
    const { pings, hashes } = await readSlots(bench.store, input.vehicles);
    const { network, match, sampler } = await remembered(bench.store, input.network, "matching", toMatch);
    const { traversals: all, openTracks, report, facts } = match(pings);
    const { wanted } = input;
    const traversals = wanted ? filterTraversals(all, (i) => wanted[network.movements[all.movement[i]].leg] === 1) : all;
    const sections = slice(network, traversals, openTracks, hashes, wanted);
    const name = `${bench.name}.legs`;
    await bench.store.put(name, sections);
    const [firstMs, lastMs] = spanOf(pings);
    return {
      name,
      offsets: offsetsOf(sections),
      totals: totalsOf(report),
      vehicles: facts.vehicles,
      firstMs,
      lastMs,
      unhindered: flat(gatherUnhindered(network, traversals)),
      clouds: input.cloudShare && sampled(sampler(input.cloudShare), pings),
    };
  },
};

function toMatch(network: Network) {
  const index = createH3Index();
  let sampler: NearSampler | undefined;
  return {
    network,
    match: createMatcher(network),
    // All pieces of a run have the same share.
    sampler: (share: Float64Array) => (sampler ??= createNearSampler(network.junctions, index, { share })),
  };
}

function sampled(sampler: NearSampler, pings: PingColumns): NearSample[] {
  sampler.add(pings);
  return sampler.finish();
}

function totalsOf({ pings, duplicates, jumps, trips, incompleteTraversals }: Matched["report"]): Totals {
  return { pings, duplicates, jumps, trips, incompleteTraversals };
}

function spanOf(pings: PingColumns): [number, number] {
  let first = Infinity;
  let last = -Infinity;
  for (let i = 0; i < pings.length; i++) {
    if (pings.tMs[i] < first) first = pings.tMs[i];
    if (pings.tMs[i] > last) last = pings.tMs[i];
  }
  return [first, last];
}

function flat(seconds: number[][]): VehiclesMatched["unhindered"] {
  const counts = Uint32Array.from(seconds, (some) => some.length);
  const all = new Float64Array(counts.reduce((sum, n) => sum + n, 0));
  let at = 0;
  for (const some of seconds) {
    all.set(some, at);
    at += some.length;
  }
  return { counts, seconds: all };
}

function slice(network: Network, traversals: Traversals, open: OpenTracks, hashes: BigInt64Array, wanted: Uint8Array | null): Uint8Array[] {
  const { slices, of } = sliceOfLeg(network);
  const dealt = (length: number, legOf: (i: number) => number): number[][] => {
    const lists: number[][] = Array.from({ length: slices }, () => []);
    for (let i = 0; i < length; i++) {
      const leg = legOf(i);
      if (wanted === null || wanted[leg] === 1) lists[of(leg)].push(i);
    }
    return lists;
  };
  const passed = dealt(traversals.length, (i) => network.movements[traversals.movement[i]].leg);
  const lost = dealt(open.length, (i) => open.leg[i]);
  return passed.map((some, s) => {
    if (some.length === 0 && lost[s].length === 0) return new Uint8Array(0);
    const part: LegPart = {
      traversals: pickTraversals(traversals, some),
      hash: BigInt64Array.from(some, (i) => hashes[traversals.vehicle[i]]),
      open: pickOpenTracks(open, lost[s]),
    };
    return lengthAndRecord(part);
  });
}
