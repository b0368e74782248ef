"use client";

import type { ReactNode } from "react";
import type { RankedJunction } from "@/domain/screen";
import { formatNumber, formatSeconds, formatShare, NO_FIGURE } from "@/ui/format";
import { EvidenceBar } from "@/ui/primitives/evidence-bar";
import { LosSquare } from "@/ui/primitives/los-square";
import { useCity } from "@/ui/shell/city";

/** How the junction stands among the city's, in figures with their intervals. */
export function JunctionStanding({ score }: { score: RankedJunction }) {
  const { locale } = useCity();
  const { delay, spill } = score;
  const span = (low: number, high: number) => `${formatNumber(low, locale)} to ${formatNumber(high, locale)}`;
  return (
    <dl className="flex flex-wrap gap-x-10 gap-y-3 font-table">
      <Figure term="rank" after={score.rankLow === null || score.rankHigh === null ? "not ranked" : `could be ${span(score.rankLow, score.rankHigh)}`}>
        {score.rank ?? NO_FIGURE}
      </Figure>
      <Figure term="mean delay" after={delay ? span(delay.low, delay.high) : "cannot be said"}>
        {formatSeconds(delay?.value, locale)}
      </Figure>
      <Figure term="spills back, worst leg" after={spill ? `${span(spill.low * 100, spill.high * 100)} of the time` : "cannot be said"}>
        {formatShare(spill?.value, locale)}
      </Figure>
      <div>
        <dt className="text-[0.92rem] text-ink-soft">level of service</dt>
        <dd className="flex min-h-9 items-center gap-2">
          <LosSquare los={score.los} />
        </dd>
      </div>
      <div>
        <dt className="text-[0.92rem] text-ink-soft">evidence</dt>
        <dd className="flex min-h-9 items-center font-medium">
          <EvidenceBar evidence={score.evidence} withWord />
        </dd>
      </div>
    </dl>
  );
}

function Figure({ term, after, children }: { term: string; after: string; children: ReactNode }) {
  return (
    <div>
      <dt className="text-[0.92rem] text-ink-soft">{term}</dt>
      <dd className="whitespace-nowrap">
        <span className="text-[1.6rem] font-semibold leading-tight tabular-nums">{children}</span> <span className="font-medium text-ink-soft">{after}</span>
      </dd>
    </div>
  );
}
