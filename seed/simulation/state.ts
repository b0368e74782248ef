import type { City } from "../network/types";
import { JAM_SPACING_M, REACTION_S, type LaneMap } from "./lanes";

/** Ring buffers hold the last vehicles of each lane: longer than any lane has places, plus leaders just gone. */
export const RING = 256;
export const RING_MASK = RING - 1;

export interface LaneState {
  /** Vehicles that have entered and left so far. */
  entered: Int32Array;
  left: Int32Array;
  places: Int32Array;
  lengthM: Float64Array;
  speedMs: Float64Array;
  /** Jam spacing that fills the lane exactly, and Newell's shortest headway at free speed. */
  spacingM: Float64Array;
  headwayS: Float64Array;
  next: Int32Array;
  nextBay: Int32Array;
  turns: Uint8Array;
  link: Int32Array;
  lastExitS: Float64Array;
  /** By lane times RING plus the vehicle's number in the lane, modulo RING. */
  entryS: Float64Array;
  exitS: Float64Array;
  vehicle: Int32Array;
  /** Since when the first vehicle has found no room downstream; NaN when it is not held so. */
  blockedSinceS: Float64Array;
}

export function createLaneState(city: City, map: LaneMap): LaneState {
  const n = map.lanes.length;
  const state: LaneState = {
    entered: new Int32Array(n), left: new Int32Array(n),
    places: Int32Array.from(map.lanes, (lane) => lane.places),
    lengthM: Float64Array.from(map.lanes, (lane) => lane.endM - lane.startM),
    speedMs: Float64Array.from(map.lanes, (lane) => city.links[lane.link].speedMs),
    spacingM: new Float64Array(n), headwayS: new Float64Array(n),
    next: Int32Array.from(map.lanes, (lane) => lane.next),
    nextBay: Int32Array.from(map.lanes, (lane) => lane.nextBay),
    turns: Uint8Array.from(map.lanes, (lane) => lane.turns),
    link: Int32Array.from(map.lanes, (lane) => lane.link),
    lastExitS: new Float64Array(n).fill(-1e9),
    entryS: new Float64Array(n * RING), exitS: new Float64Array(n * RING).fill(-1e9),
    vehicle: new Int32Array(n * RING), blockedSinceS: new Float64Array(n).fill(NaN),
  };
  for (let lane = 0; lane < n; lane++) {
    state.spacingM[lane] = state.lengthM[lane] / state.places[lane];
    state.headwayS[lane] = REACTION_S + Math.max(JAM_SPACING_M, state.spacingM[lane]) / state.speedMs[lane];
    if (state.places[lane] > RING / 2) throw new RangeError(`Lane ${lane} has ${state.places[lane]} places, more than the ring buffer holds.`);
  }
  return state;
}

/** Trips as columns, in order of departure. */
export interface Trips {
  length: number;
  departS: Float64Array;
  route: Int32Array;
  /** Driver's share of the link's free speed, at most 1. */
  pace: Float32Array;
  /** Seconds on top of the saturation headway. */
  slackS: Float32Array;
  /** Fleet of a probe vehicle; -1 for the unseen rest. */
  fleet: Int8Array;
}

/** What the simulation knows for certain, by movement. */
export interface MovementTruth {
  /** Start of the first bin, seconds of the simulation, and the bins' length. */
  startS: number;
  binS: number;
  bins: number;
  /** By movement times bins plus bin of the crossing. */
  vehicles: Int32Array;
  delayS: Float64Array;
  /** Seconds in which the first vehicle of a lane found no room downstream, by link times bins plus bin. */
  blockedS: Float64Array;
}

export function createTruth(city: City, startS: number, endS: number, binS: number): MovementTruth {
  const bins = Math.ceil((endS - startS) / binS);
  const movements = city.movements.length * bins;
  return {
    startS, binS, bins, vehicles: new Int32Array(movements), delayS: new Float64Array(movements),
    blockedS: new Float64Array(city.links.length * bins),
  };
}

/** Notes one crossing: delay over the whole link, and how long the lane was held up by a full street ahead. */
export function recordTruth(truth: MovementTruth, lanes: LaneState, lane: number, movement: number, exitS: number, entryS: number, freeS: number): void {
  const bin = Math.floor((exitS - truth.startS) / truth.binS);
  if (bin < 0 || bin >= truth.bins) return;
  truth.vehicles[movement * truth.bins + bin]++;
  truth.delayS[movement * truth.bins + bin] += exitS - entryS - freeS;
  const blockedSinceS = lanes.blockedSinceS[lane];
  if (!Number.isNaN(blockedSinceS)) truth.blockedS[lanes.link[lane] * truth.bins + bin] += exitS - blockedSinceS;
}
