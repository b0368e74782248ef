"use client";

import Link from "next/link";
import type { JunctionView, LegView, WhenQuery } from "@/domain/junction";
import { whenQueryToParams } from "@/domain/query-address";
import { formatLength, type Units } from "@/ui/format";
import { COLORS, delayColor } from "@/ui/scales";
import { useCity } from "@/ui/shell/city";
import { legDelayWords } from "./leg-delay-words";
import { shortLegName } from "./movement-words";
import { lineLength, pathOf, placeOn, planRadius, planScale, stretchOf, type PlanScale } from "./plan-geometry";
import { CrossBar, NorthArrow, ScaleBar, Streets } from "./plan-parts";

const SIZE = 440;
const MARGIN = 62;

/** The legs to scale with their needles: as long as the reach on the ground, as dark as the delay; each opens its strip. */
export function TailPlan({ view, when }: { view: JunctionView; when: WhenQuery }) {
  const { settings, locale } = useCity();
  const radiusM = planRadius(view.legs);
  const scale = planScale(radiusM, SIZE, MARGIN);
  const suffix = whenQueryToParams(when).toString();
  return (
    <figure className="min-w-0">
      <figcaption className="font-table font-medium">Tails</figcaption>
      <svg viewBox={`0 0 ${SIZE} ${SIZE}`} role="group" aria-label={`Legs of ${view.name}, north up`} className="h-auto w-full max-w-[30rem] font-table">
        <Streets streets={[...view.legs, ...view.exits]} scale={scale} radiusM={radiusM} />
        {view.legs.map((leg) => (
          <Needle key={leg.id} leg={leg} scale={scale} seenM={Math.min(radiusM, lineLength(leg.line))} />
        ))}
        {view.legs.map((leg) => (
          <LegLabel key={leg.id} leg={leg} scale={scale} seenM={Math.min(radiusM, lineLength(leg.line))} href={`/legs/${leg.id}${suffix ? `?${suffix}` : ""}`} lines={labelLines(leg, settings.units, locale)} />
        ))}
        <NorthArrow size={SIZE} isLow />
        <ScaleBar scale={scale} units={settings.units} />
      </svg>
      <p className="flex flex-wrap items-center gap-x-5 font-table text-[0.92rem] text-ink-soft">
        <span className="inline-flex items-center gap-2">
          <svg aria-hidden="true" width="32" height="14">
            <path d="M0 7H28" stroke={delayColor(60)} strokeWidth="5" />
            <path d="M28 0V14" stroke={COLORS.tail} strokeWidth="2.5" />
          </svg>
          reach, 95th percentile
        </span>
        <span className="inline-flex items-center gap-2">
          <svg aria-hidden="true" width="6" height="14">
            <path d="M3 0V14" stroke={COLORS.ink} strokeWidth="1.4" strokeDasharray="4 3" />
          </svg>
          storage
        </span>
      </p>
    </figure>
  );
}

function Needle({ leg, scale, seenM }: { leg: LegView; scale: PlanScale; seenM: number }) {
  const reach = leg.reachP95M === null ? 0 : Math.min(leg.reachP95M, seenM);
  return (
    <g>
      {reach > 0 ? (
        <>
          <path d={pathOf(stretchOf(leg.line, 0, reach), scale)} fill="none" stroke={delayColor(leg.delay?.value)} strokeWidth="5.5" />
          <CrossBar leg={leg} scale={scale} atM={reach} halfPx={9} stroke={COLORS.tail} width={2.75} />
        </>
      ) : null}
      {leg.storageM !== null && leg.storageM <= seenM ? <CrossBar leg={leg} scale={scale} atM={leg.storageM} halfPx={11} stroke={COLORS.ink} width={1.5} dashed /> : null}
      <CrossBar leg={leg} scale={scale} atM={0} halfPx={8} stroke={COLORS.ink} width={3} />
    </g>
  );
}

function labelLines(leg: LegView, units: Units, locale: string): string[] {
  const delay = legDelayWords(leg, locale);
  const room = leg.storageM === null ? "" : ` of ${formatLength(leg.storageM, units, locale)}`;
  return leg.reachP95M === null ? [delay] : [delay, `reach ${formatLength(leg.reachP95M, units, locale)}${room}`];
}

function LegLabel({ leg, scale, seenM, href, lines }: { leg: LegView; scale: PlanScale; seenM: number; href: string; lines: string[] }) {
  const { at, along } = placeOn(leg.line, seenM);
  const isEast = along[0] > 0.5;
  const isWest = along[0] < -0.5;
  const x = isEast ? SIZE - 4 : isWest ? 4 : Math.min(SIZE - 70, Math.max(70, scale.x(at[0])));
  const end = scale.y(at[1]);
  const below = along[1] < -0.3;
  // Beside a street that lies to the east or west the label stands above it; else beyond the street's end.
  const y = isEast || isWest ? end - 16 - 17 * lines.length : below ? Math.min(SIZE - 6 - 17 * lines.length, end + 18) : Math.max(14, end - 8 - 17 * lines.length);
  return (
    <text x={x} y={y} textAnchor={isEast ? "end" : isWest ? "start" : "middle"} fontSize="15.5" fill={COLORS.inkSoft} stroke={COLORS.sheet} strokeWidth="4" paintOrder="stroke">
      <Link href={href} aria-label={`Strip of the leg ${leg.name}: ${lines.join(", ")}`}>
        <tspan fontWeight="600" fill={COLORS.ink} textDecoration="underline">
          {shortLegName(leg)}
        </tspan>
      </Link>
      {lines.map((line) => (
        <tspan key={line} x={x} dy="17">
          {line}
        </tspan>
      ))}
    </text>
  );
}
