import { METHOD_VERSION } from "@/core/method-version";
import { indexCatalogue } from "@/core/scores/catalogue-index";
import { dayByJunction, type DayByJunction } from "@/core/scores/day-by-junction";
import { scoreScreen, type ScoreOptions } from "@/core/scores/score-screen";
import { emptyScreenDay } from "@/core/scores/screen-day-columns";
import { delayCode, delayOfCode, reachCode, secondsCode } from "@/core/scores/stored-figures";
import type { Catalogue, ScoreFilter, ScreenDay, ScreenScores } from "@/core/scores/types";
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
  const rows = passages
    .map((p, i) => ({ stops: 0, vehicle: 1000 * day + i, quarter: 32, ...p, code: delayCode(p.delayS) }))
    .sort((a, b) => a.movement - b.movement || a.quarter - b.quarter || a.vehicle - b.vehicle || a.code - b.code);
  const legs = queues
    .map((q) => ({ reachM: 0, spilledS: 0, observedS: 900, quarter: 32, ...q }))
    .sort((a, b) => a.leg - b.leg || a.quarter - b.quarter);
  const movements = [...new Set(rows.map((r) => r.movement))];
  const legKeys = [...new Set(legs.map((l) => l.leg))];
  const out = emptyScreenDay(day, METHOD_VERSION, { movements: movements.length, traversals: rows.length, legs: legKeys.length, legQuarters: legs.length });
  out.movement.set(movements);
  out.movementStart.set(movements.map((key) => rows.findIndex((r) => r.movement === key)));
  out.movementStart[movements.length] = rows.length;
  out.vehicle.set(rows.map((r) => r.vehicle));
  out.delay.set(rows.map((r) => r.code));
  out.quarter.set(rows.map((r) => r.quarter));
  out.stops.set(rows.map((r) => r.stops));
  out.leg.set(legKeys);
  out.legStart.set(legKeys.map((key) => legs.findIndex((l) => l.leg === key)));
  out.legStart[legKeys.length] = legs.length;
  out.reach.set(legs.map((l) => reachCode(l.reachM)));
  out.reachEstimate.set(legs.map((l) => reachCode(l.reachEstimateM ?? l.reachM)));
  out.spilled.set(legs.map((l) => secondsCode(l.spilledS)));
  out.observed.set(legs.map((l) => secondsCode(l.observedS)));
  out.legQuarter.set(legs.map((l) => l.quarter));
  return out;
}

/** What a slice says of its traversals. */
export function passagesOf(day: ScreenDay): Required<Passage>[] {
  return Array.from(day.movement).flatMap((movement, row) =>
    Array.from({ length: day.movementStart[row + 1] - day.movementStart[row] }, (_, k) => {
      const at = day.movementStart[row] + k;
      return { movement, delayS: delayOfCode(day.delay[at]), quarter: day.quarter[at], vehicle: day.vehicle[at], stops: day.stops[at] };
    }),
  );
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

/** Slices ready to be scored. */
export function daysByJunction(days: readonly ScreenDay[], catalogue: Catalogue): DayByJunction[] {
  return days.map((day) => dayByJunction(day, indexCatalogue(catalogue)));
}

/** Scores of slices as they are stored. */
export function scoreDays(days: readonly ScreenDay[], catalogue: Catalogue, filter: ScoreFilter, options?: Partial<ScoreOptions>): ScreenScores {
  return scoreScreen(daysByJunction(days, catalogue), catalogue, filter, options);
}
