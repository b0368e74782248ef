"use client";

import type { JunctionView, WhenQuery } from "@/domain/junction";
import { counted } from "@/ui/format";
import { Sentence } from "@/ui/primitives/sentence";
import { windowPreposition } from "@/ui/screens/phrases";
import { DaysControl, WindowControl } from "@/ui/screens/when-controls";
import { useCity } from "@/ui/shell/city";

export function JunctionSentence({ when, view, onChange }: { when: WhenQuery; view: JunctionView; onChange: (part: Partial<WhenQuery>) => void }) {
  const { settings, locale } = useCity();
  const vehicles = view.movements.reduce((sum, movement) => sum + movement.vehicles, 0);
  // Days on which somebody was seen here; where nobody was, the days on which that could have been.
  const days = vehicles > 0 ? (view.score?.days ?? 0) : view.basis.days;
  return (
    <Sentence label="What is shown">
      On <DaysControl query={when} onChange={onChange} basis={view.basis} locale={locale} />, {windowPreposition(when)}
      <WindowControl query={when} onChange={onChange} settings={settings} />:{" "}
      <span aria-live="polite">
        {counted(vehicles, "vehicle", "vehicles", locale)} seen on {counted(days, "day", "days", locale)}
      </span>
      .
    </Sentence>
  );
}
