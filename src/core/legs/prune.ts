import type { Joined } from "@/core/legs/join";
import { placeStopLines } from "@/core/legs/stop-lines";
import type { Usage } from "@/core/legs/usage";
import { quantileWithin } from "@/core/traversals/small-quantile";
import type { Leg, Network } from "@/core/types";

/** A leg or exit stays when this many trips, and this share of its junction's busiest leg, used it. */
const LEAST_TRIPS = 2;
const LEAST_SHARE = 0.01;
const FREE_QUANTILE = 0.8;
const LEAST_SPEEDS = 8;
/** Speeds from which on a leg's own free speed replaces one learned earlier. */
const PLENTY_SPEEDS = 60;

/**
 * Drops legs and exits that matched traffic does not use, except drawn and carried ones, and sets stop line, support,
 * free speed and storage of the rest.
 */
export function keepUsed(draft: Network, usage: Usage, carried: Set<string>): Joined {
  const busiest = new Float64Array(draft.junctions.length);
  draft.legs.forEach((leg, i) => (busiest[leg.junction] = Math.max(busiest[leg.junction], usage.leg[i])));
  const isUsed = (n: number, junction: number): boolean => n >= Math.max(LEAST_TRIPS, LEAST_SHARE * busiest[junction]);
  const stays = draft.legs.map((leg, i) => leg.origin !== "derived" || carried.has(leg.id) || isUsed(usage.leg[i], leg.junction));
  const needed = new Set(draft.legs.filter((leg, i) => stays[i] && usage.fed[i] > 0).map((leg) => leg.upstreamExit));
  const keptExit = new Int32Array(draft.exits.length).fill(-1);
  const exits = draft.exits.flatMap((exit, i) => {
    if (!isUsed(usage.exit[i], exit.junction) && !carried.has(exit.id) && !needed.has(i)) return [];
    keptExit[i] = 0;
    return [{ ...exit, support: Math.max(usage.exit[i], carried.has(exit.id) ? exit.support : 0) }];
  });
  let next = 0;
  for (let i = 0; i < keptExit.length; i++) if (keptExit[i] === 0) keptExit[i] = next++;
  const all = cityFreeSpeed(usage);
  const legs = placeStopLines(draft.legs, usage, carried).map((leg, i) => {
    const isFed = leg.upstreamExit >= 0 && (usage.fed[i] > 0 || carried.has(leg.id) || leg.origin !== "derived");
    return settleLeg(leg, isFed ? keptExit[leg.upstreamExit] : -1, usage, i, all, carried.has(leg.id));
  });
  return { legs: legs.filter((_, i) => stays[i]), exits };
}

function settleLeg(leg: Leg, upstreamExit: number, usage: Usage, i: number, cityFreeMs: number, isCarried: boolean): Leg {
  const speeds = usage.speeds[i].sort((a, b) => a - b);
  const isKnown = isCarried && speeds.length < PLENTY_SPEEDS;
  const own = speeds.length >= LEAST_SPEEDS ? quantileWithin(speeds, FREE_QUANTILE) : cityFreeMs;
  const isStorageGiven = leg.origin !== "derived" && leg.storageM > 0;
  return {
    ...leg,
    upstreamExit,
    support: Math.max(usage.leg[i], isCarried ? leg.support : 0),
    storageM: isStorageGiven ? leg.storageM : upstreamExit >= 0 ? leg.lengthM : NaN,
    freeSpeedMs: isKnown ? leg.freeSpeedMs : own,
  };
}

function cityFreeSpeed(usage: Usage): number {
  const each = usage.speeds.filter((s) => s.length >= LEAST_SPEEDS).map((s) => quantileWithin([...s].sort((a, b) => a - b), FREE_QUANTILE));
  return each.length > 0 ? quantileWithin(each.sort((a, b) => a - b), 0.5) : 13.9;
}
