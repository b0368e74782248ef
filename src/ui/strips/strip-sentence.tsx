"use client";

import type { LegStripView, StripQuery } from "@/domain/junction";
import { windowPreposition } from "@/ui/screens/phrases";
import { DaysControl, WindowControl } from "@/ui/screens/when-controls";
import { Sentence } from "@/ui/primitives/sentence";
import { useCity } from "@/ui/shell/city";
import { CellsControl, DayControl, MovementsControl, PathsControl, ShapeControl, SmoothControl } from "./strip-controls";

export function StripSentence({ query, view, onChange }: { query: StripQuery; view: LegStripView; onChange: (part: Partial<StripQuery>) => void }) {
  const { settings, locale } = useCity();
  const part = { query, view, onChange };
  return (
    <Sentence label="What is shown">
      {query.day === undefined ? "A " : null}
      <DayControl {...part} />
      {query.day === undefined ? (
        <>
          {" of "}
          <DaysControl query={query} onChange={onChange} basis={view.basis} locale={locale} />
        </>
      ) : null}
      , {windowPreposition(query)}
      <WindowControl query={query} onChange={onChange} settings={settings} />, <MovementsControl {...part} />, cells of <CellsControl {...part} /> <ShapeControl {...part} />,{" "}
      <SmoothControl {...part} />, vehicle paths <PathsControl {...part} />.
    </Sentence>
  );
}
