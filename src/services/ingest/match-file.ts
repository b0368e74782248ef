import { joinNearSamples, NEAR_SAMPLE, type NearSample } from "@/core/pings/near-sample";
import type { Network } from "@/core/types";
import type { Context } from "../context";
import { pieceSizes } from "./pieces/piece-sizes";
import { encodeRecord } from "./pieces/records";
import type { Run, Tell } from "./pieces/run";
import { matchVehicles, sliceOfLeg, type Totals, type VehiclesMatched } from "./steps/match-vehicles";
import type { Span } from "./steps/cut-time";
import { cutSlots, type SlottedPings } from "./steps/ping-slots";
import type { ObjectRange } from "./steps/tally-legs";

export interface FileMatched {
  /** Runs of legs that may be tallied apart, with the bytes that hold their traversals. */
  groups: { legs: { from: number; to: number }; parts: ObjectRange[] }[];
  totals: Totals;
  vehicles: number;
  firstMs: number;
  lastMs: number;
  /** Seconds of unhindered traversals by movement. */
  unhindered: number[][];
  /** By junction. */
  clouds: NearSample[];
}

export interface MatchSteps {
  /** 1 for each leg whose traversals are wanted; all where absent. */
  wanted?: Uint8Array;
  /** What ended before or began after is left out; nothing where absent. */
  span?: Span;
  /** Samples of the pings near junctions are drawn from the vehicles of so many slots; none where absent. */
  cloudSlots?: number;
  tell: Tell;
}

/** Matches all vehicles over the network, bucket by bucket. */
export async function matchFile(ctx: Context, run: Run, network: Network, pings: readonly SlottedPings[], name: string, steps: MatchSteps): Promise<FileMatched> {
  const sizes = pieceSizes(ctx);
  await run.store.put(name, [encodeRecord(network)]);
  const cuts = cutSlots(pings, sizes.pings, run.isShared ? sizes.least : 1);
  const inputs = cuts.map((vehicles) => ({ network: name, vehicles, wanted: steps.wanted ?? null, span: steps.span ?? null, cloudSlots: steps.cloudSlots ?? 0 }));
  const parts = await run.perform(matchVehicles, inputs, steps.tell);
  const totals: Totals = { pings: 0, duplicates: 0, jumps: 0, trips: 0, incompleteTraversals: 0 };
  for (const part of parts) for (const key of Object.keys(totals) as (keyof Totals)[]) totals[key] += part.totals[key];
  return {
    groups: groupLegs(network, parts, sizes.legBytes, run.isShared ? sizes.least : 1),
    totals,
    vehicles: parts.reduce((sum, part) => sum + part.vehicles, 0),
    firstMs: parts.reduce((least, part) => Math.min(least, part.firstMs), Infinity),
    lastMs: parts.reduce((most, part) => Math.max(most, part.lastMs), -Infinity),
    unhindered: joinSeconds(network, parts),
    clouds: joinClouds(network, parts),
  };
}

/** Runs of slices of legs with at most about `most` bytes each, and no fewer than `least` of them where there are enough. */
function groupLegs(network: Network, parts: readonly VehiclesMatched[], most: number, least: number): FileMatched["groups"] {
  const { slices, of } = sliceOfLeg(network);
  const sizes = Array.from({ length: slices }, (_, s) => parts.reduce((sum, { offsets }) => sum + offsets[s + 1] - offsets[s], 0));
  const bound = Math.min(most, sizes.reduce((sum, bytes) => sum + bytes, 0) / least);
  const firstLeg = Array.from({ length: slices + 1 }, () => network.legs.length);
  for (let leg = network.legs.length - 1; leg >= 0; leg--) firstLeg[of(leg)] = leg;
  const groups: FileMatched["groups"] = [];
  for (let from = 0; from < slices; ) {
    let to = from;
    let held = 0;
    while (to < slices && (to === from || held + sizes[to] <= bound)) held += sizes[to++];
    const ranges = parts.map(({ name, offsets }) => ({ name, from: offsets[from], to: offsets[to] }));
    if (held > 0) groups.push({ legs: { from: firstLeg[from], to: firstLeg[to] }, parts: ranges.filter((range) => range.to > range.from) });
    from = to;
  }
  return groups;
}

function joinSeconds(network: Network, parts: readonly VehiclesMatched[]): number[][] {
  const seconds: number[][] = network.movements.map(() => []);
  for (const { unhindered } of parts) {
    let at = 0;
    unhindered.counts.forEach((count, movement) => {
      for (let k = 0; k < count; k++) seconds[movement].push(unhindered.seconds[at++]);
    });
  }
  return seconds;
}

function joinClouds(network: Network, parts: readonly VehiclesMatched[]): NearSample[] {
  return network.junctions.map((_, j) => joinNearSamples(parts.flatMap((part) => part.clouds[j] ?? []), NEAR_SAMPLE.most));
}
