import { counted, formatLength, formatNumber, formatSeconds, formatShare, type Units } from "@/ui/format";
import type { StripFacts } from "./strip-facts";

/** The facts of a strip as one line of words. */
export function factsText(facts: StripFacts, units: Units, locale: string): string {
  const number = (value: number) => formatNumber(value, locale);
  const delay = facts.delay
    ? `Mean delay ${formatSeconds(facts.delay.value, locale)} (95 % interval ${number(facts.delay.low)} to ${number(facts.delay.high)})`
    : "Mean delay cannot be said";
  const kind = facts.reachKind === "95th" ? "95th percentile of reach" : "farthest reach";
  const reach = facts.reachM === null ? null : `${kind} ${formatLength(facts.reachM, units, locale)}${facts.storageM === null ? "" : ` of ${formatLength(facts.storageM, units, locale)}`}`;
  const spill = facts.spill === null ? null : `spills back ${formatShare(facts.spill.value, locale)} of the time`;
  const seen = `${counted(facts.vehicles, "vehicle", "vehicles", locale)} seen on ${counted(facts.days, "day", "days", locale)}`;
  const every = facts.medianIntervalS === null ? null : `a ping every ${formatSeconds(facts.medianIntervalS, locale)}`;
  const evidence = facts.evidence === null ? null : `evidence: ${facts.evidence}`;
  return `${[delay, reach, spill, seen, every, evidence].filter(Boolean).join("; ")}.`;
}
