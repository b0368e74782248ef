import type { ReactNode } from "react";

/** What the product says wherever it shows scores. */
export const SAMPLE_CAUTION =
  "A screening aid from a sample of vehicles. It does not see people on foot or on bicycles, and it does not replace counts, a site visit or engineering judgement.";

export const CAUTIONS = [
  "Scores are a screening aid from a sample of vehicles. They do not replace counts, a site visit or engineering judgement.",
  "Pedestrian, cyclist and emergency needs, clearance intervals and minimum greens are not seen by pings.",
  "Timing changes are designed, approved and put in by licensed practice under local codes.",
  "Field work near live traffic follows the agency's safety rules.",
] as const;

export function Caution({ children = SAMPLE_CAUTION, className = "" }: { children?: ReactNode; className?: string }) {
  return <p className={`text-sm text-ink-soft ${className}`}>{children}</p>;
}
