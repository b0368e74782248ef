import { COARSE_SHIFT, type CodeHistogram } from "./code-histogram";
import { delayCodeOf, numberOf, stopsOf } from "./day-by-junction";
import { COARSE_FROM, delayTicks, TICKS_PER_S, ZERO_DELAY } from "./stored-figures";

/** Place of vehicles above ticks of delay, of which 131,071 vehicles cannot fill it, in one number below 2^53. */
const VEHICLE = 2 ** 36;
/** Place of stops above stopped vehicles, of which there may be 67 million. */
const STOP = 2 ** 26;
/** One addition instead of two: by number of stops. */
const STOPS = Float64Array.from({ length: 256 }, (_, stops) => (stops > 0 ? 1 : 0) + stops * STOP);

/** As many as a byte can name. */
const NUMBERS = 256;

/** Sums over passages by number of their movement, whole numbers throughout: exact in any order. */
export interface EntrySums {
  /** Vehicles and ticks of one day at most. */
  delays: Float64Array;
  /** Of any number of days. */
  stops: Float64Array;
  squares: Float64Array;
  /** Vehicles of all days, for the squares. */
  vehicles: Float64Array;
  ticks: Float64Array;
}

export function createSums(): EntrySums {
  const zeros = (): Float64Array => new Float64Array(NUMBERS);
  return { delays: zeros(), stops: zeros(), squares: zeros(), vehicles: zeros(), ticks: zeros() };
}

export function emptySums(sums: EntrySums): void {
  for (const column of [sums.delays, sums.stops, sums.squares, sums.vehicles, sums.ticks]) column.fill(0);
}

/**
 * Adds the passages from..to of wanted movements to the sums, and their delays to the histogram. Those that are not
 * wanted (0 by number of the movement, else 1) are added nought times: a branch would be guessed wrong too often.
 * O(to - from).
 */
export function sumEntries(passed: Uint32Array, from: number, to: number, isWanted: Uint8Array, sums: EntrySums, { fine, coarse }: CodeHistogram): void {
  const { delays, stops, squares } = sums;
  for (let i = from; i < to; i++) {
    const word = passed[i];
    const number = numberOf(word);
    const times = isWanted[number];
    let code = delayCodeOf(word);
    fine[code] += times;
    coarse[code >> COARSE_SHIFT] += times;
    if (code >= COARSE_FROM) code = delayTicks(code);
    delays[number] += times * (VEHICLE + code);
    stops[number] += times * STOPS[stopsOf(word)];
    squares[number] += times * code * code;
  }
}

/** Takes the passages from..to of wanted movements out of the sums again. O(to - from). */
export function subtractEntries(passed: Uint32Array, from: number, to: number, isWanted: Uint8Array, sums: EntrySums): void {
  const { delays, stops, squares } = sums;
  for (let i = from; i < to; i++) {
    const word = passed[i];
    const number = numberOf(word);
    const times = isWanted[number];
    const ticks = delayTicks(delayCodeOf(word));
    delays[number] -= times * (VEHICLE + ticks);
    stops[number] -= times * STOPS[stopsOf(word)];
    squares[number] -= times * ticks * ticks;
  }
}

/**
 * Adds the delays of the passages from..to of wanted movements to the fine bins of a histogram, and nothing to any sum.
 * Returns the greatest code met, or `mostCode` where that is greater: up to it the coarse bins must be made. O(to - from).
 */
export function countDelays(passed: Uint32Array, from: number, to: number, isWanted: Uint8Array, fine: Uint32Array, mostCode: number): number {
  let most = mostCode;
  for (let i = from; i < to; i++) {
    const word = passed[i];
    const code = delayCodeOf(word);
    fine[code] += isWanted[numberOf(word)];
    if (code > most) most = code;
  }
  return most;
}

/** What one movement has had since the last time: vehicles and their seconds of delay, of one day at most. */
export interface Taken {
  vehicles: number;
  delayS: number;
}

export function takeDelays(sums: EntrySums, number: number, taken: Taken): void {
  const both = sums.delays[number];
  const vehicles = Math.floor(both / VEHICLE);
  const ticks = both - vehicles * VEHICLE;
  sums.delays[number] = 0;
  sums.vehicles[number] += vehicles;
  sums.ticks[number] += ticks;
  taken.vehicles = vehicles;
  taken.delayS = (ticks - ZERO_DELAY * vehicles) / TICKS_PER_S;
}

/** Of all that was taken: sum of squared delays, s². */
export function delaySqOf({ squares, vehicles, ticks }: EntrySums, number: number): number {
  return (squares[number] - 2 * ZERO_DELAY * ticks[number] + ZERO_DELAY * ZERO_DELAY * vehicles[number]) / (TICKS_PER_S * TICKS_PER_S);
}

export function stopsIn({ stops }: EntrySums, number: number): { stops: number; stopped: number } {
  const all = Math.floor(stops[number] / STOP);
  return { stops: all, stopped: stops[number] - all * STOP };
}
