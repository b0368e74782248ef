import type { Estimate, Evidence } from "@/core/types";

interface EvidenceRule {
  grade: Exclude<Evidence, "none">;
  vehicles: number;
  distinctVehicles: number;
  days: number;
  /** Half of the 95 % interval of mean delay: the wider of seconds and share of the mean will do. */
  halfWidthS: number;
  halfWidthShare: number;
}

/** From the strictest: the first rule that a figure meets gives its grade, none of them "none". */
export const EVIDENCE_RULES: readonly EvidenceRule[] = [
  { grade: "strong", vehicles: 100, distinctVehicles: 50, days: 5, halfWidthS: 4, halfWidthShare: 0.15 },
  { grade: "fair", vehicles: 30, distinctVehicles: 15, days: 3, halfWidthS: 8, halfWidthShare: 0.3 },
  { grade: "thin", vehicles: 10, distinctVehicles: 5, days: 1, halfWidthS: Infinity, halfWidthShare: Infinity },
];

/** No grade asks for more distinct vehicles. */
export const ENOUGH_VEHICLES = Math.max(...EVIDENCE_RULES.map((rule) => rule.distinctVehicles));

/** Fewer vehicles have no grade: they say nothing about a mean. */
export const LEAST_VEHICLES = Math.min(...EVIDENCE_RULES.map((rule) => rule.vehicles));

/** How far the sample supports a mean delay. */
export function evidenceOf(sample: { vehicles: number; distinctVehicles: number; days: number; delay: Estimate }): Evidence {
  const half = (sample.delay.high - sample.delay.low) / 2;
  for (const rule of EVIDENCE_RULES) {
    const isEnough = sample.vehicles >= rule.vehicles && sample.distinctVehicles >= rule.distinctVehicles && sample.days >= rule.days;
    const widest = Math.max(rule.halfWidthS, rule.halfWidthShare * Math.abs(sample.delay.value));
    if (isEnough && half <= widest) return rule.grade;
  }
  return "none";
}
