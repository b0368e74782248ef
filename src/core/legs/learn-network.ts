import type { JunctionIndex } from "@/core/index/junction-index";
import { faceTraffic } from "@/core/legs/bearings";
import { carryOver, type Carried } from "@/core/legs/carry-over";
import { followTraffic } from "@/core/legs/follow-traffic";
import { createFrame, type Frame } from "@/core/legs/frame";
import { noteDoubts, settleIds, settleNames } from "@/core/legs/finish";
import { applyGivenLegs } from "@/core/legs/given-legs";
import { joinArms } from "@/core/legs/join";
import { LEARNING } from "@/core/legs/learning";
import { learningSample } from "@/core/legs/learning-sample";
import { mirrorArms } from "@/core/legs/mirror";
import { listMovements } from "@/core/legs/movements";
import { PASSAGES } from "@/core/legs/passage-seeds";
import { createPingGrid } from "@/core/legs/ping-grid";
import { keepUsed } from "@/core/legs/prune";
import { refineDraft } from "@/core/legs/refine-draft";
import { relinkBroken } from "@/core/legs/relink";
import { findSeeds } from "@/core/legs/seeds";
import { dropTwins } from "@/core/legs/twins";
import { traceArm } from "@/core/legs/trace";
import { measureUsage } from "@/core/legs/usage";
import { createGraph } from "@/core/match/graph";
import type { CoreOptions } from "@/core/options";
import type { Trips } from "@/core/pings/trips";
import { AS_STRAIGHT_DEG, AS_STRAIGHT_SPARSE_DEG } from "@/core/traversals/turns";
import type { JunctionPoint, Network } from "@/core/types";

/**
 * Stage 4 on cleaned pings: derives legs and exits of every junction, lets drawn lines and earlier legs take their
 * places, and keeps what matched traffic uses. Of much traffic a sample is enough (see learningSample). `prior` is not changed.
 */
export function learnFromTrips(
  given: Trips, junctions: JunctionPoint[], index: JunctionIndex, options: CoreOptions, prior?: Network,
): Network {
  const trips = learningSample(given, junctions, index);
  const frame = createFrame(junctions, LEARNING.traceMostM + 200);
  const draft = proposeLegs(trips, frame, index, options, prior);
  const drafted = { junctions, legs: draft.legs, exits: draft.exits, driveSide: options.driveSide };
  const first: Network = { ...drafted, movements: listMovements(drafted) };
  const firstUsage = measureUsage(trips, createGraph(first));
  const relinked = relinkBroken(first, firstUsage, draft.carried, frame);
  const network = relinked ?? first;
  const usage = relinked ? measureUsage(trips, createGraph(relinked)) : firstUsage;
  const kept = faceTraffic(keepUsed(refineDraft(network, usage, draft.carried, frame), usage, draft.carried, trips.medianIntervalS), network, usage, draft.carried);
  const exits = settleIds(kept.exits, draft.carried);
  const legs = noteDoubts(settleNames(settleIds(kept.legs, draft.carried)));
  const tripsBetween = (leg: number, exit: number): number =>
    usage.movement.get(kept.legFrom[leg] * network.exits.length + kept.exitFrom[exit]) ?? 0;
  const asStraightDeg = isSparse(trips) ? AS_STRAIGHT_SPARSE_DEG : AS_STRAIGHT_DEG;
  const base = { junctions, legs, exits, driveSide: options.driveSide };
  return { ...base, movements: listMovements(base, tripsBetween, asStraightDeg) };
}

const isSparse = (trips: Trips): boolean => trips.medianIntervalS > LEARNING.sparseIntervalS;

function proposeLegs(
  trips: Trips, frame: Frame, index: JunctionIndex, options: CoreOptions, prior: Network | undefined,
): Carried {
  const rings = claimRings(frame, index, LEARNING.ringOuterM);
  const grid = createPingGrid(trips, frame, LEARNING.traceMostM);
  const reach = isSparse(trips) ? claimRings(frame, index, PASSAGES.reachM) : null;
  const traced = findSeeds(trips, frame, rings, reach).map((seed) => traceArm(seed, frame, grid, isSparse(trips)));
  const arms = isSparse(trips) ? traced : traced.map((arm) => followTraffic(arm, frame, grid));
  const joined = dropTwins(joinArms(arms, frame));
  const derived = isSparse(trips) ? mirrorArms(joined, frame, options.driveSide) : joined;
  const drawn = options.givenLegs ? applyGivenLegs(derived, options.givenLegs, frame) : derived;
  return prior ? carryOver(drawn, prior, frame) : { ...drawn, carried: new Set() };
}

function claimRings(frame: Frame, index: JunctionIndex, radiusM: number): ReturnType<JunctionIndex["claim"]> {
  const length = frame.junctions.length;
  return index.claim({
    length,
    lat: Float64Array.from(frame.junctions, (junction) => junction.lat),
    lon: Float64Array.from(frame.junctions, (junction) => junction.lon),
    radiusM: new Float64Array(length).fill(radiusM),
    owner: Uint32Array.from({ length }, (_, i) => i),
  });
}
