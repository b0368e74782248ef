import { angleBetweenDeg } from "@/core/geometry/angles";
import { placeBoxEdges } from "@/core/legs/box-edges";
import { estimateFreeSpeeds } from "@/core/legs/free-speed";
import type { Joined } from "@/core/legs/join";
import { findShortcuts } from "@/core/legs/shortcuts";
import { placeStopLines } from "@/core/legs/stop-lines";
import type { Usage } from "@/core/legs/usage";
import type { Exit, Leg, Network } from "@/core/types";

/** A leg or exit stays when this many trips, and this share of its junction's busiest leg, used it. */
const LEAST_TRIPS = 2;
const LEAST_SHARE = 0.01;
/** At a junction with legs from earlier data a new one must be plain. */
const NEW_LEAST_TRIPS = 5;
const NEW_LEAST_SHARE = 0.06;
/** Trips that leave along a street which show that it has two directions. */
const TWO_WAY_TRIPS = 3;
const SAME_ARM_DEG = 30;
/** Between junctions this near matched paths may run over streets that do not exist: pings must have been seen on them. */
const SHORT_LINK_M = 45;
const SHORT_LINK_SEEN = 2;
/** Speed at which vehicles drive along a street, m/s; of so many pings that should lie on it, at least this share must. */
const DRIVE_MS = 10;
const EXPECTED_LEAST = 2;
/** Where traffic uses the same street the other way it is there; then more is asked before a leg is taken for none. */
const EXPECTED_TWO_WAY = 8;
const SEEN_SHARE = 0.3;
/** Speeds from which on a leg's own free speed replaces one learned earlier. */
const PLENTY_SPEEDS = 60;

/** What stays of a draft, and which draft leg and exit each one was. */
export interface Kept extends Joined {
  legFrom: number[];
  exitFrom: number[];
}

/**
 * Drops legs and exits that matched traffic does not use, except drawn and carried ones, and sets stop line, support,
 * free speed and storage of the rest. `intervalS`: usual time between two pings. O(legs and exits).
 */
export function keepUsed(draft: Network, usage: Usage, carried: Set<string>, intervalS: number): Kept {
  const isUsed = usedTest(draft, usage, carried);
  const legFrom = legsThatStay(draft, usage, carried, isUsed, intervalS);
  const exitFrom = exitsThatStay(draft, usage, carried, isUsed, legFrom);
  const exitNow = new Int32Array(draft.exits.length).fill(-1);
  exitFrom.forEach((from, n) => (exitNow[from] = n));
  const free = estimateFreeSpeeds(draft, usage.speeds);
  const placed = placeStopLines(draft.legs, draft.exits, usage, carried);
  const legs = legFrom.map((i) => {
    const leg = placed[i];
    const isCarried = carried.has(leg.id);
    const isFed = leg.upstreamExit >= 0 && (usage.fed[i] > 0 || isCarried || leg.origin !== "derived");
    return settleLeg(leg, isFed ? exitNow[leg.upstreamExit] : -1, usage, i, free[i], isCarried);
  });
  const exits = exitFrom.map((i): Exit => {
    const exit = draft.exits[i];
    return { ...exit, support: Math.max(usage.exit[i], carried.has(exit.id) ? exit.support : 0) };
  });
  return { ...placeBoxEdges(legs, exits), legFrom, exitFrom };
}

/** Whether so many trips are enough at a junction. */
function usedTest(draft: Network, usage: Usage, carried: Set<string>): (trips: number, junction: number) => boolean {
  const busiest = new Float64Array(draft.junctions.length);
  draft.legs.forEach((leg, i) => (busiest[leg.junction] = Math.max(busiest[leg.junction], usage.leg[i])));
  const known = new Set(draft.legs.filter((leg) => carried.has(leg.id)).map((leg) => leg.junction));
  return (trips, junction) => {
    const [least, share] = known.has(junction) ? [NEW_LEAST_TRIPS, NEW_LEAST_SHARE] : [LEAST_TRIPS, LEAST_SHARE];
    return trips >= Math.max(least, share * busiest[junction]);
  };
}

function legsThatStay(
  draft: Network, usage: Usage, carried: Set<string>, isUsed: (trips: number, junction: number) => boolean, intervalS: number,
): number[] {
  const shortcuts = findShortcuts(draft, usage);
  const isOneOfTwo = (leg: Leg, i: number): boolean => usage.leg[i] > 0 && usage.seenOn[i] > 0 && isTwoWay(leg, draft, usage);
  const isReal = (leg: Leg, i: number): boolean =>
    isSeen(leg, draft, usage, i, intervalS) &&
    (isUsed(usage.leg[i], leg.junction) || (carried.size === 0 && isOneOfTwo(leg, i))) && !shortcuts.has(i) && (leg.lengthM > SHORT_LINK_M || usage.seenOn[i] >= SHORT_LINK_SEEN);
  return draft.legs.flatMap((leg, i) => (leg.origin !== "derived" || carried.has(leg.id) || isReal(leg, i) ? [i] : []));
}

/**
 * Whether about as many vehicles were seen on a leg as must have been, if they drove it: sparse pings of those who take
 * streets that are not known are matched over any that lead the same way.
 */
function isSeen(leg: Leg, draft: Network, usage: Usage, i: number, intervalS: number): boolean {
  const expected = usage.leg[i] * Math.min(1, leg.lengthM / (DRIVE_MS * intervalS));
  if (!(expected >= EXPECTED_LEAST) || usage.seenOn[i] >= SEEN_SHARE * expected) return true;
  return expected < EXPECTED_TWO_WAY && isTwoWay(leg, draft, usage);
}

/** Whether traffic leaves along a leg's street: then one trip is enough to believe that it also comes. */
function isTwoWay(leg: Leg, draft: Network, usage: Usage): boolean {
  return draft.exits.some(
    (exit, e) =>
      exit.junction === leg.junction && usage.exit[e] >= TWO_WAY_TRIPS && angleBetweenDeg(leg.bearingDeg + 180, exit.bearingDeg) < SAME_ARM_DEG,
  );
}

function exitsThatStay(
  draft: Network, usage: Usage, carried: Set<string>, isUsed: (trips: number, junction: number) => boolean, legFrom: number[],
): number[] {
  const feeding = new Set(legFrom.filter((i) => usage.fed[i] > 0).map((i) => draft.legs[i].upstreamExit));
  return draft.exits.flatMap((exit, i) =>
    carried.has(exit.id) || feeding.has(i) || isUsed(usage.exit[i], exit.junction) ? [i] : [],
  );
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
