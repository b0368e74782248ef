import type { JunctionIndex } from "@/core/index/junction-index";
import { createFrame, type Frame } from "@/core/legs/frame";
import { joinArms } from "@/core/legs/join";
import { LEARNING } from "@/core/legs/learning";
import { listMovements } from "@/core/legs/movements";
import { createPingGrid } from "@/core/legs/ping-grid";
import { pruneUnused } from "@/core/legs/prune";
import { findSeeds } from "@/core/legs/seeds";
import { traceArm } from "@/core/legs/trace";
import { measureUsage } from "@/core/legs/usage";
import { createGraph } from "@/core/match/graph";
import type { CoreOptions } from "@/core/options";
import type { Trips } from "@/core/pings/trips";
import type { JunctionPoint, Network } from "@/core/types";

/** Stage 4 on cleaned pings: derives legs, exits and movements of every junction, keeping what traffic uses. */
export function learnFromTrips(
  trips: Trips, junctions: JunctionPoint[], index: JunctionIndex, options: CoreOptions, prior?: Network,
): Network {
  if (prior) return { ...prior, driveSide: options.driveSide };
  const frame = createFrame(junctions, LEARNING.traceMostM + 200);
  const rings = claimRings(frame, index);
  const grid = createPingGrid(trips, frame, LEARNING.traceMostM);
  const isSparse = trips.medianIntervalS > LEARNING.sparseIntervalS;
  const arms = findSeeds(trips, frame, rings).map((seed) => traceArm(seed, frame, grid, isSparse));
  const joined = joinArms(arms, frame);
  const base = { junctions, ...joined, driveSide: options.driveSide };
  const draft: Network = { ...base, movements: listMovements(base) };
  const usage = measureUsage(trips, createGraph(draft, index));
  return pruneUnused(draft, usage);
}

function claimRings(frame: Frame, index: JunctionIndex): ReturnType<JunctionIndex["claim"]> {
  const length = frame.junctions.length;
  return index.claim({
    length,
    lat: Float64Array.from(frame.junctions, (junction) => junction.lat),
    lon: Float64Array.from(frame.junctions, (junction) => junction.lon),
    radiusM: new Float64Array(length).fill(LEARNING.ringOuterM),
    owner: Uint32Array.from({ length }, (_, i) => i),
  });
}
