import { delayOverTime } from "@/core/strips/delay-over-time";
import { spillShare, type DayReaches } from "@/core/strips/reach-of-days";
import { wilsonInterval } from "@/core/stats/wilson-interval";
import type { Evidence } from "@/core/types";
import type { LegStripView, MovementView } from "@/domain/junction";
import { estimateView, type EstimateView } from "@/domain/estimate";
import { withoutFew, type StripPicture } from "./strip-picture";

/** What stands under a strip. Null where the sample cannot say. */
export interface StripFacts {
  delay: EstimateView | null;
  stopShare: EstimateView | null;
  reachM: number | null;
  /** "95th" percentile over days, or the "farthest" of one. */
  reachKind: "95th" | "farthest";
  storageM: number | null;
  spill: EstimateView | null;
  vehicles: number;
  days: number;
  medianIntervalS: number | null;
  /** Null for a single day: the grade is of the days together. */
  evidence: Evidence | null;
}

/** Share stopping over several movements, each share counted by its vehicles, with Wilson's interval. */
export function pooledStopShare(movements: MovementView[]): EstimateView | null {
  const known = movements.filter((movement) => movement.stopShare !== null && movement.vehicles > 0);
  const vehicles = known.reduce((sum, movement) => sum + movement.vehicles, 0);
  const stopped = known.reduce((sum, movement) => sum + (movement.stopShare?.value ?? 0) * movement.vehicles, 0);
  return vehicles > 0 ? estimateView({ value: stopped / vehicles, ...wilsonInterval(stopped / vehicles, vehicles) }) : null;
}

/** Of a typical day: the figures of the scores, so that every page says the same. `daysSeen` counts days with such a vehicle. */
export function typicalFacts(view: LegStripView, turn: string, daysSeen: number): StripFacts {
  const chosen = view.movements.filter((movement) => turn === "any" || movement.turn === turn);
  return {
    delay: view.leg.delay,
    stopShare: pooledStopShare(chosen),
    reachM: view.leg.reachP95M,
    reachKind: "95th",
    storageM: view.leg.storageM,
    spill: view.leg.spill,
    vehicles: view.leg.vehicles,
    // The tracks are of the newest days where there are many.
    days: Math.max(daysSeen, ...chosen.map((movement) => movement.days)),
    medianIntervalS: view.basis.medianIntervalS,
    evidence: view.leg.evidence,
  };
}

/** Local days on which a vehicle that counts crossed in the window. */
export function daysSeen({ set, include, window }: Pick<StripPicture, "set" | "include" | "window">, crossingS: Float32Array): number {
  const days = new Set<number>();
  for (let i = 0; i < set.tracks; i++) if (include[i] === 1 && crossingS[i] >= window.fromS && crossingS[i] < window.toS) days.add(set.day[i]);
  return days.size;
}

/** Of a single day: read off its own tracks by the same methods. */
export function dayFacts(view: LegStripView, picture: StripPicture, reaches: DayReaches, crossingS: Float32Array): StripFacts {
  const { window, set, include } = picture;
  const whole = withoutFew(delayOverTime(set, crossingS, window.fromS, window.toS, window.toS - window.fromS, include));
  const reached = Array.from(reaches.reachM).filter((reach) => reach >= 0);
  const spill = view.leg.storageM === null ? NaN : spillShare(reaches, view.leg.storageM);
  // A queue lasts: a quarter of an hour of sight counts as one observation, as in the scores.
  const quarters = (reached.length * reaches.stepS) / 900;
  return {
    delay: estimateView({ value: whole.meanS[0], low: whole.lowS[0], high: whole.highS[0] }),
    stopShare: null,
    reachM: reached.length > 0 ? Math.max(...reached) : null,
    reachKind: "farthest",
    storageM: view.leg.storageM,
    spill: estimateView({ value: spill, ...wilsonInterval(spill, quarters) }),
    vehicles: whole.vehicles[0],
    days: 1,
    medianIntervalS: view.basis.medianIntervalS,
    evidence: null,
  };
}
