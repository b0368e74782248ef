import { levelOfService } from "@/core/stats/level-of-service";
import type { JunctionScore, LegScore } from "@/core/scores/types";
import type { Estimate } from "@/core/types";
import { estimateView, type EstimateView } from "@/domain/estimate";
import type { NeedleView, RankedJunction } from "@/domain/screen";
import type { CatalogueJunction } from "../catalogue/catalogue";
import type { ScoredCity } from "./score-city";

export const finite = (value: number): number | null => (Number.isFinite(value) ? value : null);

/** To so many digits: a tenth of what is shown, so that order and comparisons stay. */
function round(value: number, digits: number): number {
  const scale = 10 ** digits;
  return Math.round(value * scale) / scale;
}

/** Null for what the sample cannot say. */
function rounded(value: number | null | undefined, digits: number): number | null {
  return value === null || value === undefined || !Number.isFinite(value) ? null : round(value, digits);
}

function roundedEstimate(estimate: Estimate, digits: number): EstimateView | null {
  const view = estimateView(estimate);
  return view && { value: round(view.value, digits), low: round(view.low, digits), high: round(view.high, digits) };
}

export function losView(delay: EstimateView | null): { at: string; low: string; high: string } | null {
  if (!delay) return null;
  const [at, low, high] = [delay.value, delay.low, delay.high].map((seconds) => levelOfService(seconds));
  return at && low && high ? { at, low, high } : null;
}

export function rowOf(junction: CatalogueJunction, scored: ScoredCity): RankedJunction {
  const base = { junctionId: junction.id, code: junction.code, name: junction.name, lat: round(junction.lat, 6), lon: round(junction.lon, 6), corridorId: junction.corridorId, corridor: junction.corridor };
  const score = scored.junctionScores.get(junction.id);
  const needles = needlesOf(junction.id, scored);
  if (!score || score.vehicles === 0) return { ...base, ...UNSEEN, needles };
  // Too few to be ranked are too few for a figure, too: a published list must not tell of two vehicles.
  if (score.evidence === "none") return { ...base, ...UNSEEN, vehicles: score.vehicles, days: score.days, needles };
  const worstLeg = supportedLeg(score.worstLeg, scored);
  return {
    ...base,
    rank: finite(score.rank),
    rankLow: finite(score.rankLow),
    rankHigh: finite(score.rankHigh),
    worst: worstOf(score, scored),
    delay: roundedEstimate(score.delay, 2),
    shrunkDelayS: rounded(score.shrunk.value, 2),
    medianS: rounded(score.medianS, 2),
    p95S: rounded(score.p95S, 2),
    los: losView(estimateView(score.delay)),
    hoursSeen: rounded(score.hoursSeen, 3),
    stopsPerVehicle: rounded(score.stopsPerVehicle, 3),
    reachM: rounded(worstLeg?.reachP95M, 1),
    storageM: rounded(scored.catalogue.legs.get(score.worstLeg)?.storageM, 1),
    spill: roundedEstimate(score.spill, 4),
    vehicles: score.vehicles,
    days: score.days,
    evidence: score.evidence,
    needles,
  };
}

const UNSEEN = {
  rank: null,
  rankLow: null,
  rankHigh: null,
  worst: null,
  delay: null,
  shrunkDelayS: null,
  medianS: null,
  p95S: null,
  los: null,
  hoursSeen: null,
  stopsPerVehicle: null,
  reachM: null,
  storageM: null,
  spill: null,
  vehicles: 0,
  days: 0,
  evidence: "none" as const,
};

function worstOf(score: JunctionScore, scored: ScoredCity): RankedJunction["worst"] {
  const movement = scored.catalogue.movements.get(score.worstMovement);
  const figures = scored.scores.movement(score.worstMovement);
  const leg = movement && scored.catalogue.legs.get(movement.legId);
  if (!movement || !figures || !leg) return null;
  return { turn: movement.turn, from: leg.name, legId: leg.id, delayS: round(figures.delay.value, 2) };
}

/** Figures of a leg for lists, map and exports: none without evidence. */
function supportedLeg(legId: number, scored: ScoredCity): LegScore | undefined {
  const score = scored.scores.leg(legId);
  return score?.evidence === "none" ? undefined : score;
}

function needlesOf(junctionId: number, scored: ScoredCity): NeedleView[] {
  return (scored.catalogue.legsOfJunction.get(junctionId) ?? []).map((leg) => {
    const score = supportedLeg(leg.id, scored);
    return {
      legId: leg.id,
      lieDeg: round((leg.bearingDeg + 180) % 360, 1),
      reachM: rounded(score?.reachP95M, 0),
      delayS: rounded(score?.delay.value, 1),
    };
  });
}
