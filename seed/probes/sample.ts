import { latOf, lonOf } from "../plane";
import type { RandomStream } from "../random";
import type { PingWriter } from "../output/ping-writer";
import { DRIFT_SIGMA_M, DRIFT_TIME_S, HEADING_SIGMA_DEG, JITTER_SIGMA_M, SPEED_SIGMA_MS, type Fleet } from "./fleets";
import { createMotion, SMOOTHING_S } from "./motion";
import type { PathReader, Position } from "./positions";
import type { Recording } from "./recorder";

export interface SampleOptions {
  fleet: Fleet;
  vehicle: Uint8Array;
  /** UTC of second 0 of the simulation; whole seconds. */
  zeroMs: number;
  /** Pings outside are not delivered. */
  fromS: number;
  untilS: number;
  /** The trip ends parked, not on its way out of town. */
  isParked: boolean;
  /** How much worse than usual positions are at a place. */
  blurAt(x: number, y: number): number;
}

/** Course over ground is worthless below this speed: receivers keep the last one. */
const COURSE_SPEED_MS = 1;
const position: Position = { x: 0, y: 0, headingDeg: 0 };

export function writePings(recording: Recording, path: PathReader, options: SampleOptions, random: RandomStream, writer: PingWriter): void {
  const motion = createMotion(recording);
  const { intervalS, hasHeading, isCoarse } = options.fleet;
  const keep = Math.exp(-intervalS / DRIFT_TIME_S);
  const fresh = Math.sqrt(1 - keep * keep);
  let driftX = random.normal();
  let driftY = random.normal();
  let courseDeg = -1;
  let atS = Math.max(Math.ceil(motion.startS), Math.ceil(options.fromS)) + Math.floor(random.next() * intervalS);
  const lastS = Math.min(motion.endS + (options.isParked ? SMOOTHING_S : 0), options.untilS);
  for (; atS <= lastS; atS += intervalS) {
    motion.at(atS);
    path.at(motion.distanceM, position);
    const sigmaM = DRIFT_SIGMA_M * options.blurAt(position.x, position.y);
    const x = position.x + sigmaM * driftX + JITTER_SIGMA_M * random.normal();
    const y = position.y + sigmaM * driftY + JITTER_SIGMA_M * random.normal();
    driftX = keep * driftX + fresh * random.normal();
    driftY = keep * driftY + fresh * random.normal();
    const isStanding = motion.speedMs < 0.15;
    const speedMs = isStanding ? 0 : Math.max(0, motion.speedMs + SPEED_SIGMA_MS * random.normal());
    if (motion.speedMs > COURSE_SPEED_MS || courseDeg < 0) courseDeg = (position.headingDeg + HEADING_SIGMA_DEG * random.normal() + 360) % 360;
    const speedTenths = isCoarse ? Math.round(speedMs * 3.6) * 10 : Math.round(speedMs * 36);
    writer.write(options.vehicle, options.zeroMs + atS * 1000, latOf(y), lonOf(x), speedTenths, hasHeading ? Math.round(courseDeg) % 360 : -1);
  }
}
