"use client";

import { COLORS } from "@/ui/scales";
import { formatSpeed } from "@/ui/format";
import { useCity } from "@/ui/shell/city";
import { shadeOf } from "./draw-cells";

const SWATCHES = 16;

/** Key to the strip: speed ramp, tail line, storage line, and what an empty cell means. */
export function StripLegend({ freeMs, isTypical, hasStorage }: { freeMs: number; isTypical: boolean; hasStorage: boolean }) {
  const { settings, locale } = useCity();
  return (
    <ul aria-label="Key" className="flex flex-wrap items-center gap-x-7 gap-y-2 px-4 pb-3 font-table text-[0.92rem] text-ink-soft sm:px-6">
      <li className="flex items-center gap-2.5">
        stopped
        <svg aria-hidden="true" width={SWATCHES * 12} height="11">
          {Array.from({ length: SWATCHES }, (_, i) => (
            <rect key={i} x={i * 12} width="12.5" height="11" fill={shadeOf(i / (SWATCHES - 1))} />
          ))}
        </svg>
        free, {formatSpeed(freeMs, settings.units, locale)}
      </li>
      <li className="flex items-center gap-2.5">
        <svg aria-hidden="true" width="17" height="12">
          <rect x="0.5" y="0.5" width="16" height="11" fill={COLORS.sheet} stroke="#8A8FA0" />
        </svg>
        no vehicle seen
      </li>
      <li className="flex items-center gap-2.5">
        <svg aria-hidden="true" width="30" height="11">
          <line x2="30" y1="5.5" y2="5.5" stroke={COLORS.tail} strokeWidth="2" />
        </svg>
        {isTypical ? "tail line, 95th of observed reach" : "tail line, farthest reach observed"}
      </li>
      {hasStorage ? (
        <li className="flex items-center gap-2.5">
          <svg aria-hidden="true" width="46" height="11">
            <line x2="26" y1="5.5" y2="5.5" stroke={COLORS.ink} strokeWidth="1.4" strokeDasharray="8 5" />
            <line x1="26" x2="46" y1="5.5" y2="5.5" stroke={COLORS.tail} strokeWidth="4" />
          </svg>
          storage, solid while 90 % full, unseen tail counted
        </li>
      ) : null}
    </ul>
  );
}
