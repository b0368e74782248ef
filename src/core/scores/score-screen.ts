import { competitionRanks } from "@/core/stats/competition-ranks";
import { rankIntervals } from "@/core/stats/rank-draws";
import { TURNS, type Estimate } from "@/core/types";
import { indexCatalogue, type CatalogueIndex } from "./catalogue-index";
import { delayQuantiles, figuresOf } from "./delay-level";
import { evidenceOf } from "./evidence";
import { gatherScreen, type GatheredScreen } from "./gather-screen";
import { quantileEstimate, reachQuantiles, spillEstimate } from "./leg-level";
import { shrinkByGroup, type ShrunkUnits } from "./shrink-by-group";
import type { Catalogue, JunctionScore, LegScore, MovementScore, ScoreFilter, ScreenDay, ScreenScores } from "./types";

export interface ScoreOptions {
  /** Draws for the interval of ranks, at most 65535. */
  rankDraws: number;
  seed: number;
}

export const DEFAULT_SCORE_OPTIONS: Readonly<ScoreOptions> = Object.freeze({ rankDraws: 1000, seed: 20_260_101 });

/** A leg seen for less than this in all does not become the worst of its junction, s. */
const LEAST_OBSERVED_S = 900;

/**
 * Scores of every movement, leg and junction of the catalogue for the given days and window of the day. Which days
 * count (dates, weekdays) is the caller's choice; they may stand in any order. Junctions come in order of their key.
 * Only movements of `filter.turn` enter delays and stops; queues are the whole leg's. O(traversals + draws × junctions × log).
 */
export function scoreScreen(days: readonly ScreenDay[], catalogue: Catalogue, filter: ScoreFilter, options: Partial<ScoreOptions> = {}): ScreenScores {
  const chosen: ScoreOptions = { ...DEFAULT_SCORE_OPTIONS, ...options };
  const index = indexCatalogue(catalogue);
  const gathered = gatherScreen(days, index, filter);
  const movements = scoreMovements(index, gathered);
  const legs = scoreLegs(index, gathered);
  const junctions = scoreJunctions(index, gathered, movements, legs);
  rankJunctions(junctions.scores, junctions.shrunk, chosen);
  return { junctions: junctions.scores, movements, legs, traversals: gathered.delayS.length };
}

function scoreMovements(index: CatalogueIndex, gathered: GatheredScreen): MovementScore[] {
  const figures = figuresOf(gathered.movements, index.turnOf);
  const shrunk = shrinkByGroup(figures.intervals, gathered.movements.delay.base, index.turnOf, TURNS.length);
  return index.movements.map(({ key }, u) => {
    const sample = {
      vehicles: figures.vehicles(u),
      distinctVehicles: gathered.distinct(gathered.offset[u], gathered.offset[u + 1]),
      days: figures.days(u),
      delay: figures.delay(u),
    };
    return {
      movement: key,
      ...sample,
      ...delayQuantiles(gathered.delayS, gathered.offset[u], gathered.offset[u + 1]),
      shrunk: shrunk.estimate(u),
      stopShare: figures.stopShare(u),
      stopsPerVehicle: figures.stopsPerVehicle(u),
      evidence: evidenceOf(sample),
    };
  });
}

function scoreLegs(index: CatalogueIndex, gathered: GatheredScreen): LegScore[] {
  const figures = figuresOf(gathered.legs, new Uint8Array(index.legs.length));
  return index.legs.map(({ key }, u) => {
    const sample = {
      vehicles: figures.vehicles(u),
      distinctVehicles: gathered.distinct(gathered.offset[index.legOffset[u]], gathered.offset[index.legOffset[u + 1]]),
      days: figures.days(u),
      delay: figures.delay(u),
    };
    return {
      leg: key,
      vehicles: sample.vehicles,
      delay: sample.delay,
      ...reachQuantiles(gathered.queues.reachM[u]),
      reachEstimateP95M: quantileEstimate(gathered.queues.reachEstimateM[u], 0.95),
      spill: spillEstimate(gathered.queues, u),
      evidence: evidenceOf(sample),
    };
  });
}

function scoreJunctions(index: CatalogueIndex, gathered: GatheredScreen, movements: MovementScore[], legs: LegScore[]): { scores: JunctionScore[]; shrunk: ShrunkUnits } {
  const group = new Uint8Array(index.junctions.length);
  const figures = figuresOf(gathered.junctions, group);
  const shrunk = shrinkByGroup(figures.intervals, gathered.junctions.delay.base, group, 1);
  const legsOf: number[][] = index.junctions.map(() => []);
  index.junctionOfLeg.forEach((j, leg) => legsOf[j].push(leg));
  const scores = index.junctions.map((junction, u): JunctionScore => {
    const from = gathered.offset[index.junctionOffset[u]];
    const to = gathered.offset[index.junctionOffset[u + 1]];
    const delay = figures.delay(u);
    const sample = { vehicles: figures.vehicles(u), distinctVehicles: gathered.distinct(from, to), days: figures.days(u), delay };
    return {
      junction,
      ...sample,
      ...delayQuantiles(gathered.delayS, from, to),
      shrunk: shrunk.estimate(u),
      rank: NaN,
      rankLow: NaN,
      rankHigh: NaN,
      worstMovement: worstMovement(movements.slice(index.junctionOffset[u], index.junctionOffset[u + 1])),
      stopShare: figures.stopShare(u),
      stopsPerVehicle: figures.stopsPerVehicle(u),
      worstLeg: worstLeg(legsOf[u], index, legs),
      spill: greatestSpill(legsOf[u], legs, gathered),
      hoursSeen: (sample.vehicles * (sample.vehicles > 0 ? delay.value : 0)) / 3600,
      evidence: evidenceOf(sample),
    };
  });
  return { scores, shrunk };
}

function worstMovement(movements: MovementScore[]): number {
  let worst: MovementScore | null = null;
  for (const m of movements) {
    if (m.evidence === "none") continue;
    if (worst === null || m.shrunk.value > worst.shrunk.value) worst = m;
  }
  return worst ? worst.movement : -1;
}

/** By share of the storage; among legs without a known storage by metres, and only when no leg has one. */
function worstLeg(candidates: number[], index: CatalogueIndex, legs: LegScore[]): number {
  const hasStorage = candidates.filter((u) => index.legs[u].storageM > 0 && !Number.isNaN(legs[u].reachP95M));
  const chosen = hasStorage.length > 0 ? hasStorage : candidates;
  let worst = -1;
  let most = -Infinity;
  for (const u of chosen) {
    const fill = legs[u].reachP95M / (hasStorage.length > 0 ? index.legs[u].storageM : 1);
    if (fill > most) [worst, most] = [legs[u].leg, fill];
  }
  return worst;
}

function greatestSpill(candidates: number[], legs: LegScore[], gathered: GatheredScreen): Estimate {
  let greatest: Estimate = { value: NaN, low: NaN, high: NaN };
  for (const u of candidates) {
    if (gathered.queues.spill.base[u] < LEAST_OBSERVED_S) continue;
    if (Number.isNaN(greatest.value) || legs[u].spill.value > greatest.value) greatest = legs[u].spill;
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
