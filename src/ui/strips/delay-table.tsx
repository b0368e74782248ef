"use client";

import { formatClockRange, formatLength, formatNumber } from "@/ui/format";
import { RuledTable, Td, Th } from "@/ui/primitives/table";
import { useCity } from "@/ui/shell/city";
import { EVIDENCE_RULES } from "@/core/scores/evidence";
import { levelOfService } from "@/core/stats/level-of-service";
import type { StripPicture } from "./strip-picture";

/** A grade is a verdict, for which fewer vehicles than thin evidence asks for are too few. */
const LEAST_GRADED = Math.min(...EVIDENCE_RULES.map((rule) => rule.vehicles));

/** The curves as figures, for those who do not see the drawing and those who want to copy them. */
export function DelayTable({ picture }: { picture: StripPicture }) {
  const { settings, locale } = useCity();
  const { delay, tail } = picture;
  const rows = Array.from(delay.meanS, (meanS, k) => ({ fromS: delay.fromS + k * delay.stepS, meanS, k }));
  return (
    <details className="border-t border-rule px-4 py-2.5 sm:px-6">
      <summary className="cursor-pointer font-table font-medium">The same in figures</summary>
      <div className="max-w-3xl pb-3 pt-2">
        <RuledTable caption="Delay and reach by time of day">
          <thead>
            <tr>
              <Th>local time</Th>
              <Th numeric>vehicles</Th>
              <Th numeric>mean delay, s</Th>
              <Th numeric>95 % interval, s</Th>
              <Th>level of service</Th>
              <Th numeric>farthest tail</Th>
            </tr>
          </thead>
          <tbody>
            {rows.map(({ fromS, meanS, k }) => (
              <tr key={fromS}>
                <Td className="whitespace-nowrap">{formatClockRange(fromS / 60, (fromS + delay.stepS) / 60)}</Td>
                <Td numeric>{formatNumber(delay.vehicles[k], locale)}</Td>
                <Td numeric>{formatNumber(meanS, locale)}</Td>
                <Td numeric className="whitespace-nowrap">
                  {Number.isFinite(delay.lowS[k]) ? `${formatNumber(delay.lowS[k], locale)} to ${formatNumber(delay.highS[k], locale)}` : "–"}
                </Td>
                <Td>{delay.vehicles[k] >= LEAST_GRADED ? (levelOfService(meanS) ?? "–") : "–"}</Td>
                <Td numeric>{formatLength(farthestTail(tail, fromS, fromS + delay.stepS), settings.units, locale)}</Td>
              </tr>
            ))}
          </tbody>
        </RuledTable>
      </div>
    </details>
  );
}

/** Largest value of the tail line between two times; null where it says nothing. */
export function farthestTail(tail: StripPicture["tail"], fromS: number, toS: number): number | null {
  let farthest: number | null = null;
  for (let column = 0; column < tail.columns; column++) {
    const middle = tail.fromS + (column + 0.5) * tail.columnS;
    const reach = tail.reachM[column];
    if (middle >= fromS && middle < toS && reach >= 0) farthest = Math.max(farthest ?? 0, reach);
  }
  return farthest;
}
