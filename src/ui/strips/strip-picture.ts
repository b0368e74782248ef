import { fullFromM } from "@/core/queues/full-from";
import { DEFAULT_QUEUE_OPTIONS } from "@/core/queues/options";
import { LEAST_VEHICLES } from "@/core/scores/evidence";
import { drawableCellS } from "@/core/strips/cell-width";
import { addTracks } from "@/core/strips/add-tracks";
import { delayOverTime, type DelayOverTime } from "@/core/strips/delay-over-time";
import type { DayReaches } from "@/core/strips/reach-of-days";
import { delayByRow } from "@/core/strips/read-strip";
import { kernelOf, smoothSpeeds } from "@/core/strips/smooth";
import { createStrip, specOfWindow, speedsOf, type Strip, type StripWindow } from "@/core/strips/strip";
import { tailLine, type TailLine } from "@/core/strips/tail-line";
import type { TrackSet } from "@/core/strips/track-set";
import type { LegStripView, MovementView, StripQuery } from "@/domain/junction";

/** All that is drawn on a strip, ready for the canvas. */
export interface StripPicture {
  window: StripWindow;
  set: TrackSet;
  include: Uint8Array;
  strip: Strip;
  /** Of each cell, m/s; NaN where no vehicle was seen. */
  speeds: Float32Array;
  freeMs: number;
  tail: TailLine;
  /** 1 for each column of the tail line in which the queue fills the storage, its unseen end counted as in the share of spillback. */
  full: Uint8Array;
  delay: DelayOverTime;
  /** Excess over the reference pace in each row of cells, seconds per vehicle. */
  delayByRowS: Float32Array;
  storageM: number | null;
  hasPaths: boolean;
}

/** Used where the leg's own free speed is not known yet. */
const USUAL_FREE_MS = 50 / 3.6;
export const CELL_METRES = [5, 10, 20, 50] as const;

/** Room above the end of the leg, so that a storage line at the very end still shows. */
const HEADROOM = 1.03;

export function windowOfView({ leg, basis }: PictureView): StripWindow {
  const endM = leg.storageM !== null && leg.storageM < 1.2 * leg.lengthM ? Math.max(leg.lengthM, leg.storageM) : leg.lengthM;
  return { fromS: basis.fromMin * 60, toS: basis.toMin * 60, bottomM: 0, topM: endM * HEADROOM };
}

export function waveMsOf(query: Pick<StripQuery, "shape" | "wave">): number {
  return query.shape === "waves" ? query.wave / 3.6 : Infinity;
}

/** 1 for each track of the chosen turning movement. */
export function includeTurn(set: TrackSet, movements: MovementView[], turn: StripQuery["turn"]): Uint8Array {
  const chosen = new Set(movements.filter((movement) => turn === "any" || movement.turn === turn).map((movement) => movement.id));
  return Uint8Array.from(set.movement, (id) => (turn === "any" || chosen.has(id) ? 1 : 0));
}

/**
 * Reference time by distance over the movements that the tracks took, s/m; the free speed's where none is known.
 * A track ends at its exit cordon, so that its last point tells how long the way through the junction is.
 */
export function referencePace(set: TrackSet, include: Uint8Array, movements: MovementView[], freeMs: number): number {
  const byId = new Map(movements.map((movement) => [movement.id, movement]));
  let seconds = 0;
  let metres = 0;
  for (let i = 0; i < set.tracks; i++) {
    const movement = include[i] === 1 ? byId.get(set.movement[i]) : undefined;
    if (!movement || movement.referenceS === null) continue;
    seconds += movement.referenceS;
    metres += movement.cordonUpM - set.sM[set.offset[i + 1] - 1];
  }
  return metres > 0 ? seconds / metres : 1 / freeMs;
}

/** Steps of the delay curve: five minutes where that leaves enough vehicles in most of them, else a quarter of an hour. */
export function delayStepS(vehicles: number, window: Pick<StripWindow, "fromS" | "toS">): number {
  return (vehicles * 300) / (window.toS - window.fromS) >= 20 ? 300 : 900;
}

/** The part of a leg's view that a picture needs; a junction's page has it for each of its legs. */
export type PictureView = Pick<LegStripView, "leg" | "movements" | "basis">;

export interface PictureInput {
  view: PictureView;
  query: StripQuery;
  set: TrackSet;
  include: Uint8Array;
  crossingS: Float32Array;
  reaches: DayReaches;
}

/** Grid, tail line and delay curve for a query. Fast enough to follow a slider: about 10 ms for 5,000 tracks. */
export function buildPicture({ view, query, set, include, crossingS, reaches }: PictureInput): StripPicture {
  const window = windowOfView(view);
  const cellS = drawableCellS(query.cellS, window);
  const strip = createStrip(specOfWindow(window, cellS, query.cellM, waveMsOf(query)));
  addTracks(strip, set, include);
  const freeMs = view.leg.freeSpeedMs ?? USUAL_FREE_MS;
  const speeds = query.smooth === "on" ? smoothSpeeds(strip, kernelOf(strip.spec, freeMs, query.wave / 3.6)) : speedsOf(strip);
  const vehicles = include.reduce((sum, one) => sum + one, 0);
  const columnS = Math.max(60, cellS);
  return {
    window,
    set,
    include,
    strip,
    speeds,
    freeMs,
    tail: tailLine(reaches, columnS),
    full: fullColumns(reaches, columnS, view.leg.storageM),
    delay: withoutFew(delayOverTime(set, crossingS, window.fromS, window.toS, delayStepS(vehicles, window), include)),
    delayByRowS: delayByRow(strip, referencePace(set, include, view.movements, freeMs)),
    storageM: view.leg.storageM,
    hasPaths: query.paths === "shown",
  };
}

function fullColumns(reaches: DayReaches, columnS: number, storageM: number | null): Uint8Array {
  const { reachM } = tailLine({ ...reaches, reachM: reaches.leastTailM }, columnS);
  const fromM = fullFromM(storageM ?? NaN, DEFAULT_QUEUE_OPTIONS);
  return Uint8Array.from(reachM, (tailM) => (tailM >= fromM ? 1 : 0));
}

/** Vehicles too few for any grade of evidence say nothing about a mean: their step has a number of vehicles and no figure. */
export function withoutFew(delay: DelayOverTime): DelayOverTime {
  const [meanS, lowS, highS] = [delay.meanS, delay.lowS, delay.highS].map((values) => values.map((value, k) => (delay.vehicles[k] >= LEAST_VEHICLES ? value : NaN)));
  return { ...delay, meanS, lowS, highS };
}
