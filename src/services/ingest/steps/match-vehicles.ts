import { createNearSampler, type NearSample, type NearSampler } from "@/core/pings/near-sample";
import { createMatcher, type Matched } from "@/core/process";
import { gatherUnhindered } from "@/core/traversals/references";
import type { Network, OpenTracks, PingColumns, Traversals } from "@/core/types";
import { createH3Index } from "@/geo/h3-index";
import { filterTraversals, pickOpenTracks, pickTraversals } from "../join-traversals";
import type { PieceKind } from "../pieces/piece-kind";
import { lengthAndRecord, offsetsOf } from "../pieces/records";
import { remembered } from "../pieces/remembered";
import type { Span } from "./cut-time";
import { readSlots, vehiclesBefore, type SlotRange } from "./ping-slots";

export interface VehiclesToMatch {
  /** Object that holds the network. */
  network: string;
  vehicles: SlotRange[];
  /** 1 for each leg whose traversals are wanted; all where null. */
  wanted: Uint8Array | null;
  /** What ended before or began after is left out; nothing where null. */
  span: Span | null;
  /** Samples of the pings near junctions are drawn from the vehicles of so many slots. */
  cloudSlots: number;
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
  clouds: NearSample[];
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
    const { wanted, span } = input;
    const isAsked = (leg: number, fromMs: number, toMs: number) => (!wanted || wanted[leg] === 1) && (!span || (toMs >= span.firstMs && fromMs <= span.lastMs));
    const traversals = filterTraversals(all, (i) => isAsked(network.movements[all.movement[i]].leg, all.enterMs[i], all.exitMs[i]));
    const lost = openTracks.enterMs.map((_, i) => i).filter((i) => isAsked(openTracks.leg[i], openTracks.enterMs[i], endOf(openTracks, i)));
    const sections = slice(network, traversals, openTracks, lost, hashes);
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
      clouds: sampled(sampler, pings, vehiclesBefore(hashes, input.cloudSlots)),
    };
  },
};

function toMatch(network: Network) {
  const index = createH3Index();
  let sampler: NearSampler | undefined;
  return { network, match: createMatcher(network), sampler: () => (sampler ??= createNearSampler(network.junctions, index)) };
}

function sampled(sampler: () => NearSampler, pings: PingColumns, vehicles: number): NearSample[] {
  if (vehicles === 0) return [];
  sampler().add(pings, vehicles);
  return sampler().finish();
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

/** When the vehicle was last seen on the leg. */
function endOf(open: OpenTracks, i: number): number {
  return open.enterMs[i] + open.trackT[open.trackOffset[i + 1] - 1] * 1000;
}

/** The traversals and the chosen ones of the open tracks, slice by slice of the legs. */
function slice(network: Network, traversals: Traversals, open: OpenTracks, chosenOpen: ArrayLike<number>, hashes: BigInt64Array): Uint8Array[] {
  const { slices, of } = sliceOfLeg(network);
  const passed: number[][] = Array.from({ length: slices }, () => []);
  const lost: number[][] = Array.from({ length: slices }, () => []);
  for (let i = 0; i < traversals.length; i++) passed[of(network.movements[traversals.movement[i]].leg)].push(i);
  for (let k = 0; k < chosenOpen.length; k++) lost[of(open.leg[chosenOpen[k]])].push(chosenOpen[k]);
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
