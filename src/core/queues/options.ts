/** How standing vehicles become a queue. Seconds, metres, metres a second. */
export interface QueueOptions {
  /** A stop begins below this speed (5 km/h) ... */
  stopSpeedMs: number;
  /** ... and ends above this one (10 km/h). */
  goSpeedMs: number;
  minStopS: number;
  /** The first standing vehicle is at most this far from the stop line, */
  headM: number;
  /** each next one at most this far behind, */
  gapM: number;
  /** both where all vehicles are seen: cars, lorries and the gaps that they leave; */
  headAllM: number;
  gapAllM: number;
  /** and all were standing within this time. */
  memoryS: number;
  /** Who stood this long and moved up meanwhile is in a queue, whoever else was seen: nobody gives way for so long. */
  queuingS: number;
  /** Positions this far past the stop line still count as standing at it. */
  pastLineM: number;
  /** A leg whose storage is filled to this share spills back. */
  spillShare: number;
  /** Storage below which that cannot be said: places of vehicles are not known well enough in a leg for three. */
  leastStorageM: number;
  /** How well a ping tells where a vehicle stands: half the road that it takes. Who moved up in a queue stood far enough. */
  doubtM: number;
  /** A vehicle on the leg speaks for this long before it came and after it left. */
  sightS: number;
  /** Step in which the column is looked at. */
  stepS: number;
  /** Speed at which the start of a discharging queue runs upstream (Newell: jam spacing by reaction time). */
  waveSpeedMs: number;
  /** Road that one standing vehicle takes, gap included: 25 ft, Highway Capacity Manual Eq. 31-155. */
  jamSpacingM: number;
}

const JAM_SPACING_M = 7.62;

export const DEFAULT_QUEUE_OPTIONS: Readonly<QueueOptions> = Object.freeze({
  stopSpeedMs: 5 / 3.6,
  goSpeedMs: 10 / 3.6,
  minStopS: 2,
  headM: 100,
  gapM: 120,
  headAllM: 60,
  gapAllM: 40,
  memoryS: 40,
  queuingS: 60,
  pastLineM: 8,
  spillShare: 0.9,
  leastStorageM: 3 * JAM_SPACING_M,
  doubtM: JAM_SPACING_M / 2,
  sightS: 30,
  stepS: 5,
  waveSpeedMs: 5,
  jamSpacingM: JAM_SPACING_M,
});

export const QUARTER_MS = 900_000;
