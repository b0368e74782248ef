import { METHOD_VERSION } from "@/core/method-version";
import type { LegQuarters, Traversals } from "@/core/types";
import { localQuarter, type LocalOffset } from "./local-time";
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

interface LegRow {
  leg: number;
  quarter: number;
  reachM: number;
  reachEstimateM: number;
  spilledS: number;
  observedS: number;
}

/**
 * Splits traversals (by the moment they pass the stop line) and leg quarters into slices by local calendar day,
 * in order of day. Within a day cells stand in order of quarter, then movement. O(n log n).
 */
export function buildScreenDays(
  traversals: Traversals,
  quarters: LegQuarters,
  keys: ScreenKeys,
  localTime: readonly LocalOffset[],
): ScreenDay[] {
  const byDay = new Map<number, { traversals: number[]; legs: LegRow[] }>();
  const dayOf = (day: number): { traversals: number[]; legs: LegRow[] } => {
    const known = byDay.get(day) ?? { traversals: [], legs: [] };
    byDay.set(day, known);
    return known;
  };
  const quarterOf = new Uint8Array(traversals.length);
  for (let i = 0; i < traversals.length; i++) {
    const local = localQuarter(traversals.stopLineMs[i], localTime);
    quarterOf[i] = local.quarter;
    dayOf(local.day).traversals.push(i);
  }
  for (let k = 0; k < quarters.length; k++) {
    const local = localQuarter(quarters.startMs[k], localTime);
    dayOf(local.day).legs.push({
      leg: keys.leg[quarters.leg[k]],
      quarter: local.quarter,
      reachM: quarters.reachM[k],
      reachEstimateM: quarters.reachEstimateM[k],
      spilledS: quarters.spilledS[k],
      observedS: quarters.observedS[k],
    });
  }
  return [...byDay.entries()]
    .sort(([a], [b]) => a - b)
    .map(([day, parts]) => ({ day, methodVersion: METHOD_VERSION, ...cellsOf(parts.traversals, traversals, quarterOf, keys), ...legsOf(parts.legs) }));
}

function cellsOf(chosen: number[], t: Traversals, quarterOf: Uint8Array, keys: ScreenKeys): Omit<ScreenDay, "day" | "methodVersion" | keyof ReturnType<typeof legsOf>> {
  const key = (i: number): number => keys.movement[t.movement[i]];
  const order = chosen.sort((a, b) => quarterOf[a] - quarterOf[b] || key(a) - key(b) || t.stopLineMs[a] - t.stopLineMs[b]);
  const starts = order.flatMap((i, k) => (k === 0 || quarterOf[i] !== quarterOf[order[k - 1]] || key(i) !== key(order[k - 1]) ? [k] : []));
  return {
    cells: starts.length,
    movement: Uint32Array.from(starts, (k) => key(order[k])),
    quarter: Uint8Array.from(starts, (k) => quarterOf[order[k]]),
    offset: Uint32Array.from([...starts, order.length]),
    delayS: Float32Array.from(order, (i) => t.delayS[i]),
    stops: Uint8Array.from(order, (i) => t.stops[i]),
    vehicle: Uint32Array.from(order, (i) => keys.vehicle[t.vehicle[i]]),
  };
}

function legsOf(given: LegRow[]) {
  const rows: LegRow[] = [];
  for (const row of given.sort((a, b) => a.quarter - b.quarter || a.leg - b.leg)) {
    const last = rows.at(-1);
    // The hour that the autumn change repeats: both passes of a quarter become one entry.
    if (last && last.leg === row.leg && last.quarter === row.quarter) addPass(last, row);
    else rows.push({ ...row });
  }
  return {
    legQuarters: rows.length,
    leg: Uint32Array.from(rows, (r) => r.leg),
    legQuarter: Uint8Array.from(rows, (r) => r.quarter),
    reachM: Float32Array.from(rows, (r) => r.reachM),
    reachEstimateM: Float32Array.from(rows, (r) => r.reachEstimateM),
    spilledS: Float32Array.from(rows, (r) => r.spilledS),
    observedS: Float32Array.from(rows, (r) => r.observedS),
  };
}

function addPass(sum: LegRow, pass: LegRow): void {
  sum.reachM = Math.max(sum.reachM, pass.reachM);
  sum.reachEstimateM = Math.max(sum.reachEstimateM, pass.reachEstimateM);
  sum.spilledS += pass.spilledS;
  sum.observedS += pass.observedS;
}
