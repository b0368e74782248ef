import type { Estimate } from "@/core/types";

export interface EstimateView {
  value: number;
  low: number;
  high: number;
}

/** A figure without an interval is no figure: one vehicle says nothing about a mean. `null` stands for "the sample cannot say". */
export function estimateView(e: Estimate): EstimateView | null {
  return [e.value, e.low, e.high].every(Number.isFinite) ? { value: e.value, low: e.low, high: e.high } : null;
}
