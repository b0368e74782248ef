"use client";

import Link from "next/link";
import type { CoverageView } from "@/domain/upload";
import { counted, formatDayRange, formatNumber } from "@/ui/format";
import { RuledTable, Td, Th } from "@/ui/primitives/table";
import { useCity } from "@/ui/shell/city";

/** What the city's pings cover so far, in a sentence. */
export function coverageSentence(coverage: CoverageView, locale: string): string {
  const { junctions, covered, days } = coverage;
  if (junctions === 0) return "No junctions are loaded yet. Send the city's junctions first: pings are matched to them.";
  const city = counted(junctions, "junction", "junctions", locale);
  if (days.length === 0) return `${city} loaded, no pings yet. Send a file of pings to see where they wait.`;
  const span = formatDayRange(days[0].date, days[days.length - 1].date, locale);
  return `${formatNumber(covered, locale)} of ${city} seen on ${counted(days.length, "day", "days", locale)}, ${span}.`;
}

export function CoveragePanel({ coverage }: { coverage: CoverageView }) {
  const { locale } = useCity();
  const { days, uncovered, junctions, covered } = coverage;
  if (days.length === 0) return <p className="text-ink-soft">No day is covered yet.</p>;
  const most = Math.max(1, ...days.map((day) => day.traversals));
  return (
    <div className="flex flex-col gap-5">
      <RuledTable caption="Days with pings">
          <thead>
            <tr>
              <Th>day</Th>
              <Th colSpan={2}>traversals</Th>
              <Th numeric>junctions</Th>
              <Th numeric>ping every, s</Th>
            </tr>
          </thead>
          <tbody>
            {days.map((day) => (
              <tr key={day.date}>
                <Td className="whitespace-nowrap">{weekdayAndDate(day.date, locale)}</Td>
                <Td numeric>{formatNumber(day.traversals, locale)}</Td>
                <Td className="w-1/4 pl-0">
                  <div aria-hidden="true" className="mt-1.5 h-2.5 bg-ink" style={{ width: `${Math.max(2, (day.traversals / most) * 100)}%` }} />
                </Td>
                <Td numeric>{formatNumber(day.junctions, locale)}</Td>
                <Td numeric>{formatNumber(day.medianIntervalS, locale)}</Td>
              </tr>
            ))}
          </tbody>
      </RuledTable>
      {uncovered.length > 0 ? <Uncovered uncovered={uncovered} count={junctions - covered} locale={locale} /> : null}
    </div>
  );
}

function Uncovered({ uncovered, count, locale }: { uncovered: CoverageView["uncovered"]; count: number; locale: string }) {
  return (
    <details>
      <summary className="cursor-pointer font-medium">{counted(count, "junction", "junctions", locale)} not seen on any day</summary>
      <ul className="mt-2 columns-1 gap-6 text-[0.97rem] sm:columns-2">
        {uncovered.map(({ id, code, name }) => (
          <li key={id} className="break-inside-avoid py-1">
            <Link href={`/junctions/${id}`} className="text-link">
              {name}
            </Link>{" "}
            <span className="text-sm text-ink-soft">{code}</span>
          </li>
        ))}
      </ul>
      {uncovered.length < count ? <p className="mt-2 text-sm text-ink-soft">The first {formatNumber(uncovered.length, locale)} are listed.</p> : null}
    </details>
  );
}

/** A local calendar day, so no zone is applied. */
function weekdayAndDate(isoDate: string, locale: string): string {
  return new Intl.DateTimeFormat(locale, { weekday: "short", day: "numeric", month: "short", year: "numeric", timeZone: "UTC" }).format(new Date(`${isoDate}T00:00:00Z`));
}
