"use client";

import type { ScreenQuery, ScreenResult } from "@/domain/screen";
import { counted, formatNumber } from "@/ui/format";
import { Sentence } from "@/ui/primitives/sentence";
import { useCity } from "@/ui/shell/city";
import { CorridorControl, EvidenceControl, MinDelayControl, MinSpillControl, MovementControl, SortControl } from "./filter-controls";
import { windowPreposition } from "./phrases";
import { DaysControl, WindowControl } from "./when-controls";

export function ScreenSentence(props: {
  query: ScreenQuery;
  onChange: (part: Partial<ScreenQuery>) => void;
  result: ScreenResult | undefined;
  /** Null while the figures that were asked for are on their way. */
  shown: number | null;
}) {
  const { query, onChange, result } = props;
  const { settings, locale } = useCity();
  const count = countPhrase(result?.total, props.shown, locale);
  const part = { query, onChange };
  return (
    <Sentence label="What is shown">
      On <DaysControl {...part} basis={result?.basis} locale={locale} />, {windowPreposition(query)}
      <WindowControl {...part} settings={settings} />, <CorridorControl {...part} />, <MovementControl {...part} /> delayed <MinDelayControl {...part} />, spilling back{" "}
      <MinSpillControl {...part} />, with{" "}
      {/* Lines may break before what follows a control: the colon stays with it. */}
      <span className="inline-block">
        <EvidenceControl {...part} />
        {query.q.trim() ? "," : ":"}
      </span>{" "}
      {query.q.trim() ? `named like “${query.q.trim()}”: ` : null}
      <span aria-live="polite" aria-atomic="true" className="whitespace-nowrap text-ink" data-testid="result-count">
        {count}
      </span>
      , <SortControl {...part} />.
    </Sentence>
  );
}

function countPhrase(total: number | undefined, shown: number | null, locale: string): string {
  if (total === undefined) return "junctions not counted";
  const all = counted(total, "junction", "junctions", locale);
  return shown === null ? `counting ${all}` : `${formatNumber(shown, locale)} of ${all}`;
}
