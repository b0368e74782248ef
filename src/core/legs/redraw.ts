import { angleBetweenDeg } from "@/core/geometry/angles";
import { SAME_LEG_DEG } from "@/core/legs/carry-over";
import { settleIds, settleNames } from "@/core/legs/finish";
import { createFrame } from "@/core/legs/frame";
import { applyGivenLegs } from "@/core/legs/given-legs";
import { LEARNING } from "@/core/legs/learning";
import { relistMovements } from "@/core/legs/relist";
import type { GivenLeg } from "@/core/options";
import type { Leg, Network } from "@/core/types";

export interface Redrawn {
  network: Network;
  /** Id of the leg that each drawn line became; null where a locked leg was kept in its place. */
  legIds: (string | null)[];
}

/**
 * A known network with drawn lines in the places of its legs. At a junction with drawn lines all others go but the
 * locked ones, which stay as they are. A line within SAME_LEG_DEG of an earlier leg takes its id over, and its speed
 * limit and free speed where the line gives none. Every line must name a junction of the network. O(legs).
 */
export function redrawNetwork(known: Network, given: readonly GivenLeg[]): Redrawn {
  const frame = createFrame(known.junctions, LEARNING.traceMostM + 200);
  const joined = applyGivenLegs({ legs: known.legs, exits: known.exits }, given, frame);
  const firstDrawn = joined.legs.length - given.length;
  const untouched = joined.legs.slice(0, firstDrawn);
  const stays = new Set(untouched);
  const replaced = known.legs.filter((leg) => !stays.has(leg));
  const locked = replaced.filter((leg) => leg.locked);
  const taken = new Set<Leg>();
  const drawn = joined.legs.slice(firstDrawn).map((leg) => {
    const old = nearestOf(replaced, leg, taken);
    if (old) taken.add(old);
    return old?.locked ? null : withStorage(old ? inherit(leg, old) : leg);
  });
  const kept = [...untouched, ...locked];
  const carried = new Set([...kept, ...taken].map((leg) => leg.id));
  const legs = settleNames(settleIds([...kept, ...drawn.filter((leg) => leg !== null)], carried));
  let next = kept.length;
  const legIds = drawn.map((leg) => (leg === null ? null : legs[next++].id));
  return { network: relistMovements({ ...known, legs, exits: joined.exits }), legIds };
}

function nearestOf(replaced: readonly Leg[], drawn: Leg, taken: ReadonlySet<Leg>): Leg | undefined {
  const angle = (leg: Leg) => angleBetweenDeg(leg.bearingDeg, drawn.bearingDeg);
  return replaced
    .filter((leg) => leg.junction === drawn.junction && !taken.has(leg) && angle(leg) <= SAME_LEG_DEG)
    .sort((a, b) => angle(a) - angle(b))[0];
}

function inherit(drawn: Leg, old: Leg): Leg {
  const { id, freeSpeedMs } = old;
  return { ...drawn, id, freeSpeedMs, speedLimitMs: drawn.speedLimitMs > 0 ? drawn.speedLimitMs : old.speedLimitMs };
}

/** As for derived legs, the street between two junctions is the storage where none is given. */
function withStorage(leg: Leg): Leg {
  return leg.storageM > 0 || leg.upstreamExit < 0 ? leg : { ...leg, storageM: leg.lengthM };
}
