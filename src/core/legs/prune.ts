import { listMovements } from "@/core/legs/movements";
import type { Usage } from "@/core/legs/usage";
import { quantileWithin } from "@/core/traversals/small-quantile";
import type { Network } from "@/core/types";

/** A leg or exit stays when this many trips, and this share of its junction's busiest, used it. */
const LEAST_TRIPS = 2;
const LEAST_SHARE = 0.01;
const FREE_QUANTILE = 0.8;
const LEAST_SPEEDS = 8;

/** Drops legs and exits that matched traffic does not use, and sets support, free speed and storage of the rest. */
export function pruneUnused(draft: Network, usage: Usage): Network {
  const busiest = new Float64Array(draft.junctions.length);
  draft.legs.forEach((leg, i) => (busiest[leg.junction] = Math.max(busiest[leg.junction], usage.leg[i])));
  const isUsed = (n: number, junction: number): boolean => n >= Math.max(LEAST_TRIPS, LEAST_SHARE * busiest[junction]);
  const keptExit = new Int32Array(draft.exits.length).fill(-1);
  const exits = draft.exits.filter((exit, i) => isUsed(usage.exit[i], exit.junction));
  exits.forEach((exit, n) => (keptExit[draft.exits.indexOf(exit)] = n));
  const all = cityFreeSpeed(usage);
  const legs = draft.legs
    .map((leg, i) => {
      const feeds = leg.upstreamExit >= 0 && usage.fed[i] > 0 ? keptExit[leg.upstreamExit] : -1;
      const speeds = usage.speeds[i].sort((a, b) => a - b);
      return {
        ...leg,
        upstreamExit: feeds,
        support: usage.leg[i],
        storageM: feeds >= 0 ? leg.lengthM : NaN,
        freeSpeedMs: speeds.length >= LEAST_SPEEDS ? quantileWithin(speeds, FREE_QUANTILE) : all,
      };
    })
    .filter((leg, i) => isUsed(usage.leg[i], leg.junction));
  const kept = { ...draft, legs, exits: exits.map((exit) => ({ ...exit, support: usage.exit[draft.exits.indexOf(exit)] })) };
  return { ...kept, movements: listMovements(kept) };
}

function cityFreeSpeed(usage: Usage): number {
  const each = usage.speeds.filter((s) => s.length >= LEAST_SPEEDS).map((s) => quantileWithin([...s].sort((a, b) => a - b), FREE_QUANTILE));
  return each.length > 0 ? quantileWithin(each.sort((a, b) => a - b), 0.5) : 13.9;
}
