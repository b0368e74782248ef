"use client";

import type { ReactNode } from "react";
import { formatClockRange, formatNumber, NO_FIGURE } from "@/ui/format";
import { RuledTable, Td, Th } from "@/ui/primitives/table";
import { useCity } from "@/ui/shell/city";

/** A step of a curve of delay over the day. */
export interface DelayStep {
  fromMin: number;
  toMin: number;
  vehicles: number;
  delay: { value: number | null; low: number | null; high: number | null } | null;
  /** Of the columns that only this curve has. */
  more: ReactNode[];
}

/** A curve of delay as a table, for those who do not see the drawing and those who want to copy its figures. */
export function FiguresByTime({ caption, moreHeads, steps, className }: { caption: string; moreHeads: { head: string; numeric?: boolean }[]; steps: DelayStep[]; className?: string }) {
  const { locale } = useCity();
  return (
    <details className={className}>
      <summary className="cursor-pointer font-table font-medium">The same in figures</summary>
      <div className="max-h-96 max-w-3xl overflow-y-auto pb-3 pt-2">
        <RuledTable caption={caption}>
          <thead>
            <tr>
              <Th>local time</Th>
              <Th numeric>vehicles</Th>
              <Th numeric>mean delay, s</Th>
              <Th numeric>95 % interval, s</Th>
              {moreHeads.map(({ head, numeric }) => (
                <Th key={head} numeric={numeric}>
                  {head}
                </Th>
              ))}
            </tr>
          </thead>
          <tbody>
            {steps.map(({ fromMin, toMin, vehicles, delay, more }) => (
              <tr key={fromMin}>
                <Td className="whitespace-nowrap">{formatClockRange(fromMin, toMin)}</Td>
                <Td numeric>{formatNumber(vehicles, locale)}</Td>
                <Td numeric>{formatNumber(delay?.value, locale)}</Td>
                <Td numeric className="whitespace-nowrap">
                  {delay && isKnown(delay.low) && isKnown(delay.high) ? `${formatNumber(delay.low, locale)} to ${formatNumber(delay.high, locale)}` : NO_FIGURE}
                </Td>
                {more.map((cell, at) => (
                  <Td key={moreHeads[at].head} numeric={moreHeads[at].numeric}>
                    {cell}
                  </Td>
                ))}
              </tr>
            ))}
          </tbody>
        </RuledTable>
      </div>
    </details>
  );
}

const isKnown = (value: number | null): value is number => value !== null && Number.isFinite(value);
