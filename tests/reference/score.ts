import { groupRows, matchLegs } from "./scoring/match-legs";
import type { FoundLeg } from "./scoring/match-legs";
import { rankCorrelation } from "./scoring/rank-correlation";
import { bandError, scorablePassages, scoreTraversals } from "./scoring/score-passages";
import type { Pair, ScoreInput, Scores, ScreenRow } from "./scoring/types";
import type { TrueLeg, TrueMovement, Truth } from "./truth/types";

export type { FoundTraversal, ScoreInput, Scores, ScreenRow } from "./scoring/types";

const SPILLING_SHARE = 0.02;
/** A leg that one sampled vehicle used cannot be told from a stray. */
const USED_BY = 2;

interface MovementTriple {
  junctionId: string;
  leg: TrueLeg;
  truth: TrueMovement;
  oracle: TrueMovement;
  ours: ScreenRow | undefined;
}

/** Scores rows of the `screen` command (and, where given, single traversals) against the truth, beside the oracle's scores. */
export function scoreScreen(input: ScoreInput): Scores {
  const all = input.rows.filter((row) => row.intervalStart === "all" && row.vehicles > 0);
  const found = groupRows(all);
  const matched = matchLegs(found, input.truth);
  const scorable = scorablePassages(input.passages, input.pingTimes);
  const movements = pairMovements(input, matched);
  const known = movements.filter((m) => m.ours && !Number.isNaN(m.ours.meanDelayS));
  const byTraversal = input.traversals && scoreTraversals(input, input.traversals);
  const foundCount = input.traversals?.length ?? all.reduce((sum, row) => sum + row.vehicles, 0);
  const legs = scoreLegs(input, matched, found);
  const sampled = [...movements].reduce((sum, m) => sum + weight(m.oracle), 0);
  const overlap = movements.reduce((sum, m) => sum + Math.min(weight(m.oracle), m.ours?.vehicles ?? 0), 0);
  const cross = matched.size === 0 ? Number.NaN : overlap / Math.max(1, Math.min(sampled, foundCount));
  return {
    ...legs,
    turnsRight: byTraversal?.turnsRight ?? cross,
    countError: bandError(foundCount, scorable.length, input.passages.length) / input.passages.length,
    falseTraversals: byTraversal?.falseTraversals ?? Number.NaN,
    coverage: sumOf(known) / sumOf(movements),
    delayMaeS: scorePair(known, (m) => m.meanDelayS, (row) => row.meanDelayS, Math.abs),
    delayBiasS: scorePair(known, (m) => m.meanDelayS, (row) => row.meanDelayS, (error) => error),
    stopShareMae: scorePair(known, (m) => m.stopShare, (row) => row.stopShare, Math.abs),
    ...scoreRanks(known),
  };
}

const weight = (movement: TrueMovement) => movement.figures.all.vehicles;
const sumOf = (movements: MovementTriple[]) => movements.reduce((sum, m) => sum + weight(m.truth), 0);

function pairMovements(input: ScoreInput, matched: Map<TrueLeg, FoundLeg>): MovementTriple[] {
  return input.truth.legs.flatMap((leg, i) =>
    leg.movements.flatMap((truth) => {
      const oracle = input.oracle.legs[i].movements.find((movement) => movement.turn === truth.turn);
      const ours = matched.get(leg)?.rows.find((row) => row.turn === truth.turn);
      return oracle ? [{ junctionId: leg.junctionId, leg, truth, oracle, ours }] : [];
    }),
  );
}

/** Mean error over movements, weighted by the vehicles of the whole traffic. */
function scorePair(
  movements: MovementTriple[],
  figure: (figures: TrueMovement["figures"][string]) => number,
  ours: (row: ScreenRow) => number,
  shape: (error: number) => number,
): Pair {
  const pair = { ours: 0, oracle: 0 };
  const total = sumOf(movements);
  for (const m of movements) {
    if (!m.ours) continue;
    const truth = figure(m.truth.figures.all);
    pair.ours += (weight(m.truth) / total) * shape(ours(m.ours) - truth);
    pair.oracle += (weight(m.truth) / total) * shape(figure(m.oracle.figures.all) - truth);
  }
  return total > 0 ? pair : { ours: Number.NaN, oracle: Number.NaN };
}

function scoreLegs(input: ScoreInput, matched: Map<TrueLeg, FoundLeg>, found: FoundLeg[]) {
  const { truth, oracle } = input;
  const usedBy = (leg: Truth["legs"][number]) => leg.movements.reduce((sum, movement) => sum + weight(movement), 0);
  const used = truth.legs.filter((_, i) => usedBy(oracle.legs[i]) >= USED_BY);
  const triples = truth.legs.flatMap((leg, i) => {
    const row = matched.get(leg)?.rows[0];
    return row && used.includes(leg) ? [{ truth: leg.figures.all, oracle: oracle.legs[i].figures.all, row }] : [];
  });
  const reach = triples.filter(({ row }) => !Number.isNaN(row.queueReachM));
  const mean = (values: number[]) => values.reduce((sum, v) => sum + v, 0) / values.length;
  const spill = triples.filter((t) => t.truth.spillbackShare !== null);
  const spilling = (value: number | null) => value !== null && value >= SPILLING_SHARE;
  const isTrue = spill.map((t) => spilling(t.truth.spillbackShare));
  const isOurs = spill.map((t) => spilling(t.row.spillbackShare));
  const isOracle = spill.map((t) => spilling(t.oracle.spillbackShare));
  return {
    legRecall: used.filter((leg) => matched.has(leg)).length / used.length,
    legPrecision: matched.size / found.length,
    reachMaeM: {
      ours: mean(reach.map((t) => Math.abs(t.row.queueReachM - t.truth.reachM))),
      oracle: mean(reach.map((t) => Math.abs(t.oracle.reachM - t.truth.reachM))),
    },
    reachBiasM: {
      ours: mean(reach.map((t) => t.row.queueReachM - t.truth.reachM)),
      oracle: mean(reach.map((t) => t.oracle.reachM - t.truth.reachM)),
    },
    spillbackPrecision: { ours: precision(isOurs, isTrue), oracle: precision(isOracle, isTrue) },
    spillbackRecall: { ours: precision(isTrue, isOurs), oracle: precision(isTrue, isOracle) },
  };
}

/** Of those said to be so, the share that are; NaN where none is said to be. */
function precision(said: boolean[], are: boolean[]): number {
  const hits = said.filter((value, i) => value && are[i]).length;
  return hits / said.filter(Boolean).length;
}

function scoreRanks(movements: MovementTriple[]): Pick<Scores, "rankByDelay" | "rankByVehicleHours"> {
  const junctions = [...new Set(movements.map((m) => m.junctionId))];
  const totals = (vehicles: (m: MovementTriple) => number, delayS: (m: MovementTriple) => number) =>
    junctions.map((id) => {
      const own = movements.filter((m) => m.junctionId === id);
      const seconds = own.reduce((sum, m) => sum + vehicles(m) * delayS(m), 0);
      return { seconds, mean: seconds / own.reduce((sum, m) => sum + vehicles(m), 0) };
    });
  const truth = totals((m) => weight(m.truth), (m) => m.truth.figures.all.meanDelayS);
  const oracle = totals((m) => weight(m.oracle), (m) => m.oracle.figures.all.meanDelayS);
  const ours = totals((m) => m.ours?.vehicles ?? 0, (m) => m.ours?.meanDelayS ?? 0);
  const compare = (key: "mean" | "seconds"): Pair => ({
    ours: rankCorrelation(ours.map((t) => t[key]), truth.map((t) => t[key])),
    oracle: rankCorrelation(oracle.map((t) => t[key]), truth.map((t) => t[key])),
  });
  return { rankByDelay: compare("mean"), rankByVehicleHours: compare("seconds") };
}
