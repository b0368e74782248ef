import { lengthOf } from "@/core/geometry/polyline";
import type { Evidence } from "@/core/types";
import type { LegDetail, LegScore, MovementDetail, MovementScore } from "@/core/scores/types";
import type { ExitView, LegView, MovementView } from "@/domain/junction";
import { estimateView } from "@/domain/estimate";
import { finite, losView } from "../screens/ranked-row";
import type { LegRow, MovementRow } from "./junction-rows";

export function pairsOf(line: readonly number[]): [number, number][] {
  const pairs: [number, number][] = [];
  for (let i = 0; i + 1 < line.length; i += 2) pairs.push([line[i], line[i + 1]]);
  return pairs;
}

const NO_EVIDENCE: Evidence = "none";

export function legView(row: LegRow, score: LegScore | undefined, detail: LegDetail | undefined): LegView {
  return {
    id: row.id,
    name: row.name,
    bearingDeg: row.bearingDeg,
    line: pairsOf(row.line),
    lengthM: lengthOf(row.line),
    storageM: row.storageM,
    upstream: row.upstreamJunctionId === null ? null : { junctionId: row.upstreamJunctionId, name: row.upstreamName ?? "" },
    freeSpeedMs: row.freeSpeedMs,
    origin: row.origin,
    stopLineOrigin: row.stopLineOrigin,
    doubts: row.doubts,
    vehicles: score?.vehicles ?? 0,
    delay: score ? estimateView(score.delay) : null,
    reachP50M: detail ? finite(detail.reachP50M) : null,
    reachP95M: score ? finite(score.reachP95M) : null,
    reachEstimateP95M: detail ? estimateView(detail.reachEstimateP95M) : null,
    spill: score ? estimateView(score.spill) : null,
    evidence: score?.evidence ?? NO_EVIDENCE,
  };
}

export function exitView(row: { id: number; bearingDeg: number; line: number[] }): ExitView {
  return { id: row.id, bearingDeg: row.bearingDeg, line: pairsOf(row.line) };
}

export function movementView(row: MovementRow, score: MovementScore | undefined, detail: MovementDetail | undefined): MovementView {
  const delay = score ? estimateView(score.delay) : null;
  return {
    ...row,
    vehicles: score?.vehicles ?? 0,
    days: score?.days ?? 0,
    delay,
    medianS: detail ? finite(detail.medianS) : null,
    p95S: detail ? finite(detail.p95S) : null,
    // A grade is a verdict, for which such a sample is too small; the interval tells an engineer as much.
    los: score?.evidence === "none" ? null : losView(delay),
    stopShare: score ? estimateView(score.stopShare) : null,
    stopsPerVehicle: score ? finite(score.stopsPerVehicle) : null,
    evidence: score?.evidence ?? NO_EVIDENCE,
  };
}
