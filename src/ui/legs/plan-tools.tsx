"use client";

import { formatSpeed } from "@/ui/format";
import { Button } from "@/ui/primitives/button";
import { useCity } from "@/ui/shell/city";
import { CLOUD_STYLES, DIRECTION_RING, directionColor, FREE_MS, pingSpeedColor, type CloudStyle } from "./cloud-colors";

/** Radii of the plan from near to far, m. */
export const RADII_M = [35, 55, 85, 130, 200, 400, 800] as const;
export const FIRST_RADIUS = 3;

const STYLE_WORDS: Record<CloudStyle, string> = { direction: "by direction", speed: "by speed", hidden: "hidden" };

interface Props {
  zoom: number;
  onZoom: (zoom: number) => void;
  style: CloudStyle;
  onStyle: (style: CloudStyle) => void;
  pings: number | null;
}

/** What stands above the plan: how near, and how its pings are drawn, with the key to their colours. */
export function PlanTools({ zoom, onZoom, style, onStyle, pings }: Props) {
  return (
    <div className="flex flex-wrap items-center gap-x-5 gap-y-2 font-table text-[0.95rem]">
      <div className="flex gap-1.5">
        <Button aria-label="Nearer" disabled={zoom === 0} onClick={() => onZoom(zoom - 1)}>
          +
        </Button>
        <Button aria-label="Farther" disabled={zoom === RADII_M.length - 1} onClick={() => onZoom(zoom + 1)}>
          −
        </Button>
      </div>
      <fieldset className="flex flex-wrap items-center gap-x-3.5">
        <legend className="float-left mr-3 text-ink-soft">Pings</legend>
        {CLOUD_STYLES.map((value) => (
          <label key={value} className="flex min-h-7 cursor-pointer items-center gap-1.5">
            <input type="radio" name="cloud" value={value} checked={style === value} onChange={() => onStyle(value)} className="size-4 accent-pick" />
            {STYLE_WORDS[value]}
          </label>
        ))}
      </fieldset>
      <CloudKey style={style} />
      {pings === 0 ? <span className="text-ink-soft">No ping of this junction is kept yet.</span> : null}
    </div>
  );
}

function CloudKey({ style }: { style: CloudStyle }) {
  const { settings, locale } = useCity();
  if (style === "hidden") return null;
  if (style === "direction") {
    return (
      <span className="inline-flex flex-wrap items-center gap-x-3 text-ink-soft">
        {DIRECTION_RING.slice(0, 4).map(({ from }, i) => (
          <span key={from} className="inline-flex items-center gap-1">
            <svg aria-hidden="true" width="14" height="14" viewBox="-7 -7 14 14">
              <path d="M0 6V-5M-3 -2L0 -6L3 -2" transform={`rotate(${from})`} fill="none" stroke={directionColor(from)} strokeWidth="2" />
            </svg>
            {["north", "east", "south", "west"][i]}bound
          </span>
        ))}
      </span>
    );
  }
  return (
    <span className="inline-flex items-center gap-2 text-ink-soft">
      stopped
      <svg aria-hidden="true" width="90" height="10">
        {Array.from({ length: 9 }, (_, i) => (
          <rect key={i} x={i * 10} width="10" height="10" fill={pingSpeedColor((i / 8) * FREE_MS)} />
        ))}
      </svg>
      {formatSpeed(FREE_MS, settings.units, locale)} and more
    </span>
  );
}
