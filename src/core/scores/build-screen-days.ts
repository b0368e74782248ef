import { METHOD_VERSION } from "@/core/method-version";
import type { LegQuarters, Traversals } from "@/core/types";
import { localQuarter, type LocalOffset } from "./local-time";
import { emptyScreenDay } from "./screen-day-columns";
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

/** What belongs to one day: indices of traversals and of leg quarters. */
interface DayParts {
  traversals: number[];
  legQuarters: number[];
}

/**
 * Splits traversals (by the moment they pass the stop line) and leg quarters into slices by local calendar day,
 * in order of day. O(n log n).
 */
export function buildScreenDays(
  traversals: Traversals,
  quarters: LegQuarters,
  keys: ScreenKeys,
  localTime: readonly LocalOffset[],
): ScreenDay[] {
  const byDay = new Map<number, DayParts>();
  const partsOf = (day: number): DayParts => {
    const known = byDay.get(day) ?? { traversals: [], legQuarters: [] };
    byDay.set(day, known);
    return known;
  };
  const quarterOf = new Uint8Array(traversals.length);
  for (let i = 0; i < traversals.length; i++) {
    const local = localQuarter(traversals.stopLineMs[i], localTime);
    quarterOf[i] = local.quarter;
    partsOf(local.day).traversals.push(i);
  }
  const legQuarterOf = new Uint8Array(quarters.length);
  for (let k = 0; k < quarters.length; k++) {
    const local = localQuarter(quarters.startMs[k], localTime);
    legQuarterOf[k] = local.quarter;
    partsOf(local.day).legQuarters.push(k);
  }
  return [...byDay.entries()]
    .sort(([a], [b]) => a - b)
    .map(([day, parts]) => {
      const passed = rowsBy(parts.traversals, (i) => keys.movement[traversals.movement[i]]);
      const queued = rowsBy(parts.legQuarters, (k) => keys.leg[quarters.leg[k]]);
      for (const row of queued) row.members.sort((a, b) => legQuarterOf[a] - legQuarterOf[b]);
      const out = emptyScreenDay(day, METHOD_VERSION, {
        movements: passed.length,
        traversals: parts.traversals.length,
        legs: queued.length,
        legQuarters: queued.reduce((sum, { members }) => sum + distinctOf(members, legQuarterOf), 0),
      });
      fillTraversals(out, passed, { traversals, quarterOf, keys });
      fillQueues(out, queued, quarters, legQuarterOf);
      return out;
    });
}

/** One key and all that belongs to it. */
interface Row {
  key: number;
  members: number[];
}

function rowsBy(members: readonly number[], keyOf: (member: number) => number): Row[] {
  const rows = new Map<number, Row>();
  for (const member of members) {
    const key = keyOf(member);
    const row = rows.get(key);
    if (row) row.members.push(member);
    else rows.set(key, { key, members: [member] });
  }
  return [...rows.values()].sort((a, b) => a.key - b.key);
}

function distinctOf(sorted: readonly number[], quarterOf: Uint8Array): number {
  return sorted.reduce((sum, member, k) => sum + Number(k === 0 || quarterOf[member] !== quarterOf[sorted[k - 1]]), 0);
}

function fillTraversals(out: ScreenDay, rows: Row[], from: { traversals: Traversals; quarterOf: Uint8Array; keys: ScreenKeys }): void {
  const { traversals, quarterOf, keys } = from;
  const vehicleOf = (i: number): number => keys.vehicle[traversals.vehicle[i]];
  let at = 0;
  rows.forEach(({ key, members }, row) => {
    out.movement[row] = key;
    const inOrder = (a: number, b: number): number =>
      quarterOf[a] - quarterOf[b] ||
      vehicleOf(a) - vehicleOf(b) ||
      delayCode(traversals.delayS[a]) - delayCode(traversals.delayS[b]) ||
      traversals.stops[a] - traversals.stops[b];
    for (const i of members.sort(inOrder)) {
      out.quarter[at] = quarterOf[i];
      out.vehicle[at] = vehicleOf(i);
      out.delay[at] = delayCode(traversals.delayS[i]);
      out.stops[at] = traversals.stops[i];
      at += 1;
    }
    out.movementStart[row + 1] = at;
  });
}

/** The hour that the autumn change repeats: both passes of a quarter become one entry. */
function fillQueues(out: ScreenDay, rows: Row[], quarters: LegQuarters, quarterOf: Uint8Array): void {
  let at = -1;
  rows.forEach(({ key, members }, row) => {
    out.leg[row] = key;
    let [spilledS, observedS] = [0, 0];
    members.forEach((k, m) => {
      if (m === 0 || quarterOf[k] !== quarterOf[members[m - 1]]) {
        at += 1;
        [spilledS, observedS] = [0, 0];
      }
      spilledS += quarters.spilledS[k];
      observedS += quarters.observedS[k];
      out.legQuarter[at] = quarterOf[k];
      out.reach[at] = Math.max(out.reach[at], reachCode(quarters.reachM[k]));
      out.reachEstimate[at] = Math.max(out.reachEstimate[at], reachCode(quarters.reachEstimateM[k]));
      out.spilled[at] = secondsCode(spilledS);
      out.observed[at] = secondsCode(observedS);
    });
    out.legStart[row + 1] = at + 1;
  });
}
