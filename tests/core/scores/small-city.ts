import { METHOD_VERSION } from "@/core/method-version";
import type { Catalogue, ScreenDay } from "@/core/scores/types";
import { TURNS } from "@/core/types";

export interface Passage {
  movement: number;
  delayS: number;
  quarter?: number;
  vehicle?: number;
  stops?: number;
}

export interface Queue {
  leg: number;
  quarter?: number;
  reachM?: number;
  reachEstimateM?: number;
  spilledS?: number;
  observedS?: number;
}

/** A slice with the given passages (in quarter 32, 08:00, unless said), each by a vehicle of its own unless said. */
export function screenDay(day: number, passages: Passage[], queues: Queue[] = []): ScreenDay {
  const quarter = (p: { quarter?: number }): number => p.quarter ?? 32;
  const rows = passages
    .map((p, i) => ({ stops: 0, vehicle: 1000 * day + i, ...p, quarter: quarter(p) }))
    .sort((a, b) => a.quarter - b.quarter || a.movement - b.movement);
  const starts = rows.flatMap((r, k) => (k === 0 || r.quarter !== rows[k - 1].quarter || r.movement !== rows[k - 1].movement ? [k] : []));
  const legs = queues.map((q) => ({ reachM: 0, spilledS: 0, observedS: 900, ...q, quarter: quarter(q) })).sort((a, b) => a.quarter - b.quarter || a.leg - b.leg);
  return {
    day,
    methodVersion: METHOD_VERSION,
    cells: starts.length,
    movement: Uint32Array.from(starts, (k) => rows[k].movement),
    quarter: Uint8Array.from(starts, (k) => rows[k].quarter),
    offset: Uint32Array.from([...starts, rows.length]),
    delayS: Float32Array.from(rows, (r) => r.delayS),
    stops: Uint8Array.from(rows, (r) => r.stops),
    vehicle: Uint32Array.from(rows, (r) => r.vehicle),
    legQuarters: legs.length,
    leg: Uint32Array.from(legs, (l) => l.leg),
    legQuarter: Uint8Array.from(legs, (l) => l.quarter),
    reachM: Float32Array.from(legs, (l) => l.reachM),
    reachEstimateM: Float32Array.from(legs, (l) => l.reachEstimateM ?? l.reachM),
    spilledS: Float32Array.from(legs, (l) => l.spilledS),
    observedS: Float32Array.from(legs, (l) => l.observedS),
  };
}

/** Junctions 1 to n, each with leg 10 j and one movement for each turn, 100 j + turn. */
export function catalogueOf(junctions: number): Catalogue {
  const keys = Array.from({ length: junctions }, (_, k) => k + 1);
  return {
    movements: keys.flatMap((j) => TURNS.map((turn, t) => ({ key: 100 * j + t, leg: 10 * j, junction: j, turn }))),
    legs: keys.map((j) => ({ key: 10 * j, junction: j, storageM: 200 })),
  };
}

/** The through movement of junction j. */
export function through(j: number): number {
  return 100 * j + 1;
}

export const ALL_DAY = { fromQuarter: 0, toQuarter: 96, turn: null };
