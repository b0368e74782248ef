"use client";

import type { ReactNode } from "react";
import { formatClockRange, formatLength, formatNumber, formatSeconds, formatShare, NO_FIGURE } from "@/ui/format";
import type { EstimateView } from "@/domain/estimate";
import { classNames } from "@/ui/primitives/class-names";
import { EvidenceBar } from "@/ui/primitives/evidence-bar";
import { useCity } from "@/ui/shell/city";
import type { StripFacts } from "./strip-facts";

/** Share of time from which spillback is marked, as in the ranked list. */
const MUCH_SPILL = 0.1;

/** The figures under a strip, each with its interval, and what they rest on. */
export function FactsLine({ facts, fromMin, toMin, children }: { facts: StripFacts; fromMin: number; toMin: number; children?: ReactNode }) {
  const { settings, locale } = useCity();
  const { units } = settings;
  const seconds = (value: number) => formatNumber(value, locale);
  const percent = (value: number) => formatNumber(value * 100, locale);
  const every = facts.medianIntervalS === null ? "" : `, every ${formatNumber(facts.medianIntervalS, locale)} s`;
  return (
    <section aria-label="Figures" className="border-t border-rule bg-paper px-4 py-4 sm:px-6">
      <div className="flex flex-wrap items-start gap-x-12 gap-y-4">
        <dl className="flex flex-wrap gap-x-9 gap-y-4">
          <Fact term={`${formatClockRange(fromMin, toMin)}, mean delay`} figure={formatSeconds(facts.delay?.value, locale)} after={spanOf(facts.delay, seconds)} />
          {facts.stopShare ? <Fact term="must stop" figure={formatShare(facts.stopShare.value, locale)} after={spanOf(facts.stopShare, percent)} /> : null}
          <Fact
            term={facts.reachKind === "95th" ? "reach, 95th percentile" : "farthest reach"}
            figure={formatLength(facts.reachM, units, locale)}
            after={facts.storageM === null ? "storage not known" : `of ${formatLength(facts.storageM, units, locale)}`}
          />
          <Fact
            term="spills back"
            figure={formatShare(facts.spill?.value, locale)}
            after={facts.spill ? `of the time, ${spanOf(facts.spill, percent)}` : "cannot be said"}
            isHot={facts.spill !== null && facts.spill.value >= MUCH_SPILL}
          />
          <Fact term={facts.days === 1 ? "seen on 1 day" : `seen on ${facts.days} days`} figure={formatNumber(facts.vehicles, locale)} after={`${facts.vehicles === 1 ? "vehicle" : "vehicles"}${every}`} />
          {facts.evidence ? (
            <div className="font-table">
              <dt className="text-[0.92rem] text-ink-soft">evidence</dt>
              <dd className="flex min-h-9 items-center font-medium">
                <EvidenceBar evidence={facts.evidence} withWord />
              </dd>
            </div>
          ) : null}
        </dl>
        {children ? <div className="max-w-sm min-w-60 flex-1 lg:ml-auto">{children}</div> : null}
      </div>
    </section>
  );
}

function spanOf(estimate: EstimateView | null, format: (value: number) => string): string {
  return estimate ? `${format(estimate.low)} to ${format(estimate.high)}` : "the sample cannot say";
}

function Fact({ term, figure, after, isHot = false }: { term: string; figure: string; after: string; isHot?: boolean }) {
  return (
    <div className="font-table">
      <dt className="text-[0.92rem] text-ink-soft">{term}</dt>
      <dd className="whitespace-nowrap">
        <span className={classNames("text-[1.6rem] font-semibold leading-tight tabular-nums", isHot && figure !== NO_FIGURE && "text-tail")}>{figure}</span>{" "}
        <span className="font-medium text-ink-soft">{after}</span>
      </dd>
    </div>
  );
}
