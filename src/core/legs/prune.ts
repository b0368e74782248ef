import { placeBoxEdges } from "@/core/legs/box-edges";
import type { Joined } from "@/core/legs/join";
import { estimateFreeSpeeds } from "@/core/legs/free-speed";
import { findShortcuts } from "@/core/legs/shortcuts";
import { placeStopLines } from "@/core/legs/stop-lines";
import type { Usage } from "@/core/legs/usage";
import type { Leg, Network } from "@/core/types";

/** A leg or exit stays when this many trips, and this share of its junction's busiest leg, used it. */
const LEAST_TRIPS = 2;
const LEAST_SHARE = 0.01;
/** At a junction with legs from earlier data a new one must be plain. */
const NEW_LEAST_TRIPS = 5;
const NEW_LEAST_SHARE = 0.06;
/** Between junctions this near matched paths may run over streets that do not exist: pings must have been seen on them. */
const SHORT_LINK_M = 45;
const SHORT_LINK_SEEN = 2;
/** Speeds from which on a leg's own free speed replaces one learned earlier. */
const PLENTY_SPEEDS = 60;

/** What stays of a draft, and which draft leg and exit each one was. */
export interface Kept extends Joined {
  legFrom: number[];
  exitFrom: number[];
}

/**
 * Drops legs and exits that matched traffic does not use, except drawn and carried ones, and sets stop line, support,
 * free speed and storage of the rest.
 */
export function keepUsed(draft: Network, usage: Usage, carried: Set<string>): Kept {
  const busiest = new Float64Array(draft.junctions.length);
  draft.legs.forEach((leg, i) => (busiest[leg.junction] = Math.max(busiest[leg.junction], usage.leg[i])));
  const shortcuts = findShortcuts(draft, usage);
  const known = new Set(draft.legs.filter((leg) => carried.has(leg.id)).map((leg) => leg.junction));
  const isUsed = (n: number, junction: number): boolean => {
    const [trips, share] = known.has(junction) ? [NEW_LEAST_TRIPS, NEW_LEAST_SHARE] : [LEAST_TRIPS, LEAST_SHARE];
    return n >= Math.max(trips, share * busiest[junction]);
  };
  const isReal = (leg: Leg, i: number): boolean =>
    isUsed(usage.leg[i], leg.junction) && !shortcuts.has(i) && (leg.lengthM > SHORT_LINK_M || usage.seenOn[i] >= SHORT_LINK_SEEN);
  const stays = draft.legs.map((leg, i) => leg.origin !== "derived" || carried.has(leg.id) || isReal(leg, i));
  const needed = new Set(draft.legs.filter((leg, i) => stays[i] && usage.fed[i] > 0).map((leg) => leg.upstreamExit));
  const keptExit = new Int32Array(draft.exits.length).fill(-1);
  const exits = draft.exits.flatMap((exit, i) => {
    if (!isUsed(usage.exit[i], exit.junction) && !carried.has(exit.id) && !needed.has(i)) return [];
    keptExit[i] = 0;
    return [{ ...exit, support: Math.max(usage.exit[i], carried.has(exit.id) ? exit.support : 0) }];
  });
  let next = 0;
  for (let i = 0; i < keptExit.length; i++) if (keptExit[i] === 0) keptExit[i] = next++;
  const free = estimateFreeSpeeds(draft, usage.speeds);
  const legs = placeStopLines(draft.legs, usage, carried).map((leg, i) => {
    const isFed = leg.upstreamExit >= 0 && (usage.fed[i] > 0 || carried.has(leg.id) || leg.origin !== "derived");
    return settleLeg(leg, isFed ? keptExit[leg.upstreamExit] : -1, usage, i, free[i], carried.has(leg.id));
  });
  const placed = placeBoxEdges(legs.filter((_, i) => stays[i]), exits);
  const numbers = (count: number): number[] => Array.from({ length: count }, (_, i) => i);
  return {
    ...placed,
    legFrom: numbers(draft.legs.length).filter((i) => stays[i]),
    exitFrom: numbers(draft.exits.length).filter((i) => keptExit[i] >= 0),
  };
}

function settleLeg(leg: Leg, upstreamExit: number, usage: Usage, i: number, freeSpeedMs: number, isCarried: boolean): Leg {
  const isKnown = isCarried && usage.speeds[i].length < PLENTY_SPEEDS;
  const isStorageGiven = (leg.locked || leg.origin !== "derived") && leg.storageM > 0;
  return {
    ...leg,
    upstreamExit,
    support: Math.max(usage.leg[i], isCarried ? leg.support : 0),
    storageM: isStorageGiven ? leg.storageM : upstreamExit >= 0 ? leg.lengthM : NaN,
    freeSpeedMs: isKnown ? leg.freeSpeedMs : freeSpeedMs,
  };
}
