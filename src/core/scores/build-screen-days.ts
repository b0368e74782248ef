import { METHOD_VERSION } from "@/core/method-version";
import type { LegQuarters, Traversals } from "@/core/types";
import { localQuarter, type LocalOffset } from "./local-time";
import { emptyScreenDay } from "./screen-day-columns";
import { QUARTERS } from "./starts";
import { delayCode, reachCode, secondsCode } from "./stored-figures";
import type { ScreenDay } from "./types";

/** Names by which the caller knows things, by their index in the network and by dense vehicle number. */
export interface ScreenKeys {
  /** By index into `Network.movements`. */
  movement: ArrayLike<number>;
  /** By index into `Network.legs`. */
  leg: ArrayLike<number>;
  /** Hash of the vehicle by its dense number. */
  vehicle: ArrayLike<number>;
}

/** One of the two lists that are split by day. */
interface List {
  /** Index of the movement or leg by member, and the key of each. */
  of: Uint32Array;
  keys: ArrayLike<number>;
  quarter: Uint8Array;
  /** Members of each day. */
  byDay: Map<number, number[]>;
}

/**
 * Splits traversals (by the moment they pass the stop line) and leg quarters into slices by local calendar day,
 * in order of day. O(n + days × movements).
 */
export function buildScreenDays(
  traversals: Traversals,
  quarters: LegQuarters,
  keys: ScreenKeys,
  localTime: readonly LocalOffset[],
): ScreenDay[] {
  const passages = split(traversals.length, traversals.movement, keys.movement, traversals.stopLineMs, localTime);
  const queues = split(quarters.length, quarters.leg, keys.leg, quarters.startMs, localTime);
  const days = [...new Set([...passages.byDay.keys(), ...queues.byDay.keys()])].sort((a, b) => a - b);
  return days.map((day) => {
    const passed = arrange(passages, day);
    const queued = arrange(queues, day);
    const out = emptyScreenDay(day, METHOD_VERSION, {
      movements: passed.keys.length,
      traversals: passed.members.length,
      legs: queued.keys.length,
      legQuarters: queued.cellsInUse,
    });
    fillTraversals(out, passed, traversals, keys);
    fillQueues(out, queued, quarters);
    return out;
  });
}

function split(length: number, of: Uint32Array, keys: ArrayLike<number>, moments: Float64Array, localTime: readonly LocalOffset[]): List {
  const byDay = new Map<number, number[]>();
  const quarter = new Uint8Array(length);
  for (let i = 0; i < length; i++) {
    const local = localQuarter(moments[i], localTime);
    quarter[i] = local.quarter;
    const members = byDay.get(local.day);
    if (members) members.push(i);
    else byDay.set(local.day, [i]);
  }
  return { of, keys, quarter, byDay };
}

/** The members of one day in order of their row's key, then of quarter. */
interface Arranged {
  keys: number[];
  members: Uint32Array;
  /** Members of row r in quarter q: from start[96 r + q] to start[96 r + q + 1]. */
  start: Uint32Array;
  cellsInUse: number;
}

/** Counts, then places: cells are many and have few members. */
function arrange({ of, keys, quarter, byDay }: List, day: number): Arranged {
  const given = byDay.get(day) ?? [];
  const rowKeys = [...new Set(given.map((i) => keys[of[i]]))].sort((a, b) => a - b);
  const rowByKey = new Map(rowKeys.map((key, row) => [key, row]));
  const cellOf = Uint32Array.from(given, (i) => (rowByKey.get(keys[of[i]]) as number) * QUARTERS + quarter[i]);
  const start = new Uint32Array(rowKeys.length * QUARTERS + 1);
  for (const cell of cellOf) start[cell + 1] += 1;
  let cellsInUse = 0;
  for (let cell = 0; cell + 1 < start.length; cell++) {
    if (start[cell + 1] > 0) cellsInUse += 1;
    start[cell + 1] += start[cell];
  }
  const members = new Uint32Array(given.length);
  const next = start.slice();
  given.forEach((i, k) => (members[next[cellOf[k]]++] = i));
  return { keys: rowKeys, members, start, cellsInUse };
}

function fillTraversals(out: ScreenDay, { keys: rowKeys, members, start }: Arranged, traversals: Traversals, keys: ScreenKeys): void {
  out.movement.set(rowKeys);
  for (let row = 0; row < rowKeys.length; row++) out.movementStart[row + 1] = start[(row + 1) * QUARTERS];
  const vehicleOf = (i: number): number => keys.vehicle[traversals.vehicle[i]];
  const inOrder = (a: number, b: number): number =>
    vehicleOf(a) - vehicleOf(b) || delayCode(traversals.delayS[a]) - delayCode(traversals.delayS[b]) || traversals.stops[a] - traversals.stops[b];
  for (let cell = 0; cell + 1 < start.length; cell++) {
    const [from, to] = [start[cell], start[cell + 1]];
    if (to - from > 1) members.subarray(from, to).sort(inOrder);
    for (let at = from; at < to; at++) {
      const i = members[at];
      out.quarter[at] = cell % QUARTERS;
      out.vehicle[at] = vehicleOf(i);
      out.delay[at] = delayCode(traversals.delayS[i]);
      out.stops[at] = traversals.stops[i];
    }
  }
}

/** The hour that the autumn change repeats: both passes of a quarter become one entry. */
function fillQueues(out: ScreenDay, { keys, members, start }: Arranged, quarters: LegQuarters): void {
  out.leg.set(keys);
  let at = 0;
  for (let cell = 0; cell + 1 < start.length; cell++) {
    if (start[cell] < start[cell + 1]) {
      let [spilledS, observedS] = [0, 0];
      for (let m = start[cell]; m < start[cell + 1]; m++) {
        const k = members[m];
        spilledS += quarters.spilledS[k];
        observedS += quarters.observedS[k];
        out.reach[at] = Math.max(out.reach[at], reachCode(quarters.reachM[k]));
        out.reachEstimate[at] = Math.max(out.reachEstimate[at], reachCode(quarters.reachEstimateM[k]));
      }
      out.legQuarter[at] = cell % QUARTERS;
      out.spilled[at] = secondsCode(spilledS);
      out.observed[at] = secondsCode(observedS);
      at += 1;
    }
    if (cell % QUARTERS === QUARTERS - 1) out.legStart[(cell + 1) / QUARTERS] = at;
  }
}
