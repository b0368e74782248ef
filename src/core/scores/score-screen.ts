import { competitionRanks } from "@/core/stats/competition-ranks";
import { rankIntervals } from "@/core/stats/rank-draws";
import { TURNS, type Estimate, type Evidence } from "@/core/types";
import { indexCatalogue, type CatalogueIndex } from "./catalogue-index";
import { figuresOf } from "./delay-level";
import { evidenceOf } from "./evidence";
import { gatherScreen } from "./gather-screen";
import type { GatheredScreen } from "./gathered";
import { spillEstimate } from "./leg-level";
import { shrinkByGroup, type ShrunkUnits } from "./shrink-by-group";
import type { DayByJunction } from "./day-by-junction";
import type { Catalogue, JunctionScore, LegScore, MovementScore, ScoreFilter, ScreenScores } from "./types";

export interface ScoreOptions {
  /** Draws for the interval of ranks, at most 65535. With 500 an end is off by a thirtieth of the interval's length (standard error). */
  rankDraws: number;
  seed: number;
}

export const DEFAULT_SCORE_OPTIONS: Readonly<ScoreOptions> = Object.freeze({ rankDraws: 500, seed: 20_260_101 });

/** A leg seen for less than this in all does not become the worst of its junction, s. */
const LEAST_OBSERVED_S = 900;

/**
 * Scores of every movement, leg and junction of the catalogue for the given days and window of the day. Which days
 * count (dates, weekdays) is the caller's choice; they may stand in any order. Junctions come in order of their key.
 * Only movements of `filter.turn` enter delays and stops; queues are the whole leg's. Sums are exact over delays kept
 * to 1/64 s, medians and percentiles exact order statistics of them. O(days × movements + traversals and leg quarters
 * of the window + draws × junctions).
 */
export function scoreScreen(days: readonly DayByJunction[], catalogue: Catalogue, filter: ScoreFilter, options: Partial<ScoreOptions> = {}): ScreenScores {
  const chosen: ScoreOptions = { ...DEFAULT_SCORE_OPTIONS, ...options };
  const index = indexCatalogue(catalogue);
  const gathered = gatherScreen(days, index, filter);
  const movements = movementFigures(index, gathered);
  const leg = legScores(index, gathered);
  const junctions = scoreJunctions(index, gathered, movements);
  rankJunctions(junctions.scores, junctions.shrunk, chosen);
  const scored = <T>(of: (unit: number) => T, unit: number | undefined): T | undefined => (unit === undefined ? undefined : of(unit));
  return {
    junctions: junctions.scores,
    movement: (key) => scored(movements.score, index.movementByKey.get(key)),
    leg: (key) => scored(leg, index.legByKey.get(key)),
    traversals: gathered.traversals,
  };
}

/** By dense number; scores are put together where they are asked for: a city has some ten thousand movements. */
interface MovementFigures {
  shrunk: ShrunkUnits;
  evidence(unit: number): Evidence;
  score(unit: number): MovementScore;
}

function movementFigures(index: CatalogueIndex, gathered: GatheredScreen): MovementFigures {
  const figures = figuresOf(gathered.movements, index.turnOf);
  const shrunk = shrinkByGroup(figures.intervals, gathered.movements.delay.base, index.turnOf, TURNS.length);
  const sampleOf = (u: number) => ({ vehicles: figures.vehicles(u), distinctVehicles: gathered.distinct.movements[u], days: figures.days(u), delay: figures.delay(u) });
  const evidence = (u: number): Evidence => evidenceOf(sampleOf(u));
  return {
    shrunk,
    evidence,
    score: (u) => ({
      movement: index.movements[u].key,
      ...sampleOf(u),
      shrunk: shrunk.estimate(u),
      stopShare: figures.stopShare(u),
      stopsPerVehicle: figures.stopsPerVehicle(u),
      evidence: evidence(u),
    }),
  };
}

function legScores(index: CatalogueIndex, gathered: GatheredScreen): (unit: number) => LegScore {
  const figures = figuresOf(gathered.legs, new Uint8Array(index.legs.length));
  return (u) => {
    const sample = { vehicles: figures.vehicles(u), distinctVehicles: gathered.distinct.legs[u], days: figures.days(u), delay: figures.delay(u) };
    return {
      leg: index.legs[u].key,
      vehicles: sample.vehicles,
      delay: sample.delay,
      reachP95M: gathered.reachP95M[u],
      spill: spillEstimate(gathered.spill, u),
      evidence: evidenceOf(sample),
    };
  };
}

function scoreJunctions(index: CatalogueIndex, gathered: GatheredScreen, movements: MovementFigures): { scores: JunctionScore[]; shrunk: ShrunkUnits } {
  const group = new Uint8Array(index.junctions.length);
  const figures = figuresOf(gathered.junctions, group);
  const shrunk = shrinkByGroup(figures.intervals, gathered.junctions.delay.base, group, 1);
  const scores = index.junctions.map((junction, u): JunctionScore => {
    const delay = figures.delay(u);
    const sample = { vehicles: figures.vehicles(u), distinctVehicles: gathered.distinct.junctions[u], days: figures.days(u), delay };
    const legs = range(index.junctionLegOffset[u], index.junctionLegOffset[u + 1]);
    return {
      junction,
      ...sample,
      medianS: gathered.medianS[u],
      p95S: gathered.p95S[u],
      shrunk: shrunk.estimate(u),
      rank: NaN,
      rankLow: NaN,
      rankHigh: NaN,
      worstMovement: worstMovement(index.junctionOffset[u], index.junctionOffset[u + 1], movements, index),
      stopShare: figures.stopShare(u),
      stopsPerVehicle: figures.stopsPerVehicle(u),
      worstLeg: worstLeg(legs, index, gathered),
      spill: greatestSpill(legs, gathered),
      hoursSeen: (sample.vehicles * (sample.vehicles > 0 ? delay.value : 0)) / 3600,
      evidence: evidenceOf(sample),
    };
  });
  return { scores, shrunk };
}

function range(from: number, to: number): number[] {
  return Array.from({ length: to - from }, (_, k) => from + k);
}

function worstMovement(from: number, to: number, figures: MovementFigures, index: CatalogueIndex): number {
  let worst = -1;
  let most = -Infinity;
  for (let u = from; u < to; u++) {
    // The order on the scale of the shrinkage is that of seconds.
    if (figures.shrunk.log[u] > most && figures.evidence(u) !== "none") [worst, most] = [index.movements[u].key, figures.shrunk.log[u]];
  }
  return worst;
}

/** By share of the storage; among legs without a known storage by metres, and only when no leg has one. */
function worstLeg(candidates: number[], index: CatalogueIndex, { reachP95M }: GatheredScreen): number {
  const hasStorage = candidates.filter((u) => index.legs[u].storageM > 0 && !Number.isNaN(reachP95M[u]));
  const chosen = hasStorage.length > 0 ? hasStorage : candidates;
  let worst = -1;
  let most = -Infinity;
  for (const u of chosen) {
    const fill = reachP95M[u] / (hasStorage.length > 0 ? index.legs[u].storageM : 1);
    if (fill > most) [worst, most] = [index.legs[u].key, fill];
  }
  return worst;
}

function greatestSpill(candidates: number[], gathered: GatheredScreen): Estimate {
  let greatest: Estimate = { value: NaN, low: NaN, high: NaN };
  for (const u of candidates) {
    if (gathered.spill.base[u] < LEAST_OBSERVED_S) continue;
    const spill = spillEstimate(gathered.spill, u);
    if (Number.isNaN(greatest.value) || spill.value > greatest.value) greatest = spill;
  }
  return greatest;
}

/** Ranks by shrunk mean delay, 1 for the worst; junctions without evidence stay unranked. */
function rankJunctions(scores: JunctionScore[], shrunk: ShrunkUnits, options: ScoreOptions): void {
  const ranked = scores.flatMap((score, u) => (score.evidence === "none" ? [] : [u]));
  const value = ranked.map((u) => shrunk.log[u]);
  const ranks = competitionRanks(value);
  const { low, high } = rankIntervals(value, ranked.map((u) => shrunk.logSd[u]), { draws: options.rankDraws, seed: options.seed });
  ranked.forEach((u, k) => {
    scores[u].rank = ranks[k];
    scores[u].rankLow = Math.min(low[k], ranks[k]);
    scores[u].rankHigh = Math.max(high[k], ranks[k]);
  });
}
