"use client";

import Link from "next/link";
import type { JunctionView, LegView, WhenQuery } from "@/domain/junction";
import { whenQueryToParams } from "@/domain/junction";
import { formatLength, formatSeconds, type Units } from "@/ui/format";
import { COLORS, delayColor, DELAY_SCALE } from "@/ui/scales";
import { useCity } from "@/ui/shell/city";
import { flowsOf, pathOf, placeOn, planRadius, planScale, stretchOf, type Flow, type PlanScale } from "./plan-geometry";

const SIZE = 620;
const MARGIN = 74;
const STREET_M = 8;

/** The junction drawn to scale: streets, movements as bands, and how far back the tails stood. */
export function JunctionPlan({ view, when }: { view: JunctionView; when: WhenQuery }) {
  const { settings, locale } = useCity();
  const scale = planScale(planRadius(view.legs), SIZE, MARGIN);
  const radius = planRadius(view.legs);
  const flows = flowsOf(view, scale);
  const suffix = whenQueryToParams(when).toString();
  return (
    <figure aria-label="Plan of the junction" className="flex flex-col">
      <svg viewBox={`0 0 ${SIZE} ${SIZE}`} role="group" aria-label={planSummary(view)} className="h-auto w-full font-table">
        {[...view.legs, ...view.exits].map((street) => (
          <path key={`${"name" in street ? "leg" : "exit"}${street.id}`} d={pathOf(stretchOf(street.line, 0, Math.min(radius, lineLength(street.line))), scale)} fill="none" stroke="#EDE6D7" strokeWidth={Math.max(9, STREET_M * scale.perM)} strokeLinecap="butt" />
        ))}
        {flows.map((flow) => (
          <FlowBand key={flow.movement.id} flow={flow} />
        ))}
        {view.legs.map((leg) => (
          <LegMarks key={leg.id} leg={leg} scale={scale} radius={radius} units={settings.units} locale={locale} href={`/legs/${leg.id}${suffix ? `?${suffix}` : ""}`} />
        ))}
        <NorthArrow />
        <ScaleBar scale={scale} units={settings.units} />
      </svg>
      <PlanKey />
    </figure>
  );
}

function FlowBand({ flow }: { flow: Flow }) {
  const color = delayColor(flow.movement.delay?.value);
  const half = Math.max(4.5, flow.widthPx * 0.5 + 3);
  const [x, y] = flow.tip;
  return (
    <g>
      <path d={flow.path} fill="none" stroke={COLORS.sheet} strokeWidth={flow.widthPx + 1.6} />
      <path d={flow.path} fill="none" stroke={color} strokeWidth={flow.widthPx} />
      <path d={`M${-half} 0L0 ${-half * 1.5}L${half} 0Z`} transform={`translate(${x.toFixed(1)} ${y.toFixed(1)}) rotate(${flow.headingDeg.toFixed(1)})`} fill={color} stroke={COLORS.sheet} strokeWidth="0.8" />
    </g>
  );
}

function LegMarks(props: { leg: LegView; scale: PlanScale; radius: number; units: Units; locale: string; href: string }) {
  const { leg, scale, radius, units, locale, href } = props;
  const length = lineLength(leg.line);
  const seen = Math.min(radius, length);
  const reach = leg.reachP95M === null ? null : Math.min(leg.reachP95M, seen);
  return (
    <g>
      <CrossBar leg={leg} scale={scale} atM={0} widthM={STREET_M + 4} stroke={COLORS.ink} width={3} />
      {reach !== null && reach > 0 ? (
        <>
          <path d={pathOf(stretchOf(leg.line, 0, reach), scale)} fill="none" stroke={COLORS.sheet} strokeWidth="4.5" />
          <path d={pathOf(stretchOf(leg.line, 0, reach), scale)} fill="none" stroke={COLORS.tail} strokeWidth="2.25" />
          <CrossBar leg={leg} scale={scale} atM={reach} widthM={STREET_M} stroke={COLORS.tail} width={2.25} />
        </>
      ) : null}
      {leg.storageM !== null && leg.storageM <= seen ? <CrossBar leg={leg} scale={scale} atM={leg.storageM} widthM={STREET_M + 8} stroke={COLORS.ink} width={1.4} dashed /> : null}
      <LegLabel leg={leg} scale={scale} atM={seen} href={href} lines={labelLines(leg, units, locale)} />
    </g>
  );
}

function labelLines(leg: LegView, units: Units, locale: string): string[] {
  const delay = leg.delay === null ? "no figure" : `${formatSeconds(Math.max(0, leg.delay.value), locale)} delay`;
  const reach = leg.reachP95M === null ? null : `reach ${formatLength(leg.reachP95M, units, locale)}${leg.storageM === null ? "" : ` of ${formatLength(leg.storageM, units, locale)}`}`;
  return [delay, reach].filter((line): line is string => line !== null);
}

/** A bar across a leg, as stop lines and tails are drawn. */
function CrossBar(props: { leg: LegView; scale: PlanScale; atM: number; widthM: number; stroke: string; width: number; dashed?: boolean }) {
  const { at, along } = placeOn(props.leg.line, props.atM);
  const half = Math.max(7, (props.widthM * props.scale.perM) / 2);
  const [x, y] = [props.scale.x(at[0]), props.scale.y(at[1])];
  // Across: the direction turned by a quarter, with y growing downwards on paper.
  const [dx, dy] = [along[1] * half, along[0] * half];
  return <line x1={x - dx} y1={y - dy} x2={x + dx} y2={y + dy} stroke={props.stroke} strokeWidth={props.width} strokeDasharray={props.dashed ? "4 3" : undefined} />;
}

function LegLabel({ leg, scale, atM, href, lines }: { leg: LegView; scale: PlanScale; atM: number; href: string; lines: string[] }) {
  const { at, along } = placeOn(leg.line, atM);
  const x = scale.x(at[0]) + along[0] * 12;
  const y = scale.y(at[1]) - along[1] * 14;
  const anchor = along[0] > 0.5 ? "end" : along[0] < -0.5 ? "start" : "middle";
  const clamped = anchor === "end" ? Math.min(SIZE - 4, x + 62) : anchor === "start" ? Math.max(4, x - 62) : x;
  const top = along[1] > 0.5 ? y - 16 * lines.length : along[1] < -0.5 ? y + 12 : y - 28 - 8 * lines.length;
  const [from] = leg.name.split(",");
  return (
    <text x={clamped} y={top} textAnchor={anchor} fontSize="15" fill={COLORS.inkSoft} stroke={COLORS.sheet} strokeWidth="4" paintOrder="stroke">
      <Link href={href} aria-label={`Strip of the leg ${leg.name}: ${lines.join(", ")}`}>
        <tspan fontWeight="600" fill={COLORS.ink} textDecoration="underline">
          {from}
        </tspan>
      </Link>
      {lines.map((line) => (
        <tspan key={line} x={clamped} dy="17">
          {line}
        </tspan>
      ))}
    </text>
  );
}

function NorthArrow() {
  return (
    <g transform={`translate(${SIZE - 26} 34)`} aria-hidden="true">
      <path d="M0 -20L6 4L0 0L-6 4Z" fill={COLORS.ink} />
      <text y="20" textAnchor="middle" fontSize="14" fill={COLORS.ink}>
        N
      </text>
    </g>
  );
}

const METRES_PER_FOOT = 0.3048;

function ScaleBar({ scale, units }: { scale: PlanScale; units: Units }) {
  const unit = units === "us" ? METRES_PER_FOOT : 1;
  const length = [20, 50, 100, 200, 500].find((candidate) => candidate * unit * scale.perM >= 60) ?? 500;
  const width = length * unit * scale.perM;
  return (
    <g transform={`translate(16 ${SIZE - 16})`} aria-hidden="true">
      <path d={`M0 -5V0H${width}V-5`} fill="none" stroke={COLORS.ink} strokeWidth="1.4" />
      <text x={width + 8} y="1" fontSize="14" fill={COLORS.inkSoft}>
        {length} {units === "us" ? "ft" : "m"}
      </text>
    </g>
  );
}

function PlanKey() {
  return (
    <ul aria-label="Key to the plan" className="flex flex-wrap items-center gap-x-6 gap-y-1.5 pt-2 font-table text-[0.92rem] text-ink-soft">
      <li className="flex items-center gap-2">
        mean delay, s
        <svg aria-hidden="true" width={DELAY_SCALE.length * 30} height="26">
          {DELAY_SCALE.map((step, i) => (
            <g key={step.from}>
              <rect x={i * 30} width="30" height="10" fill={step.color} />
              <text x={i * 30} y="23" fontSize="12" fill={COLORS.inkSoft} textAnchor={i === 0 ? "start" : "middle"}>
                {step.from}
              </text>
            </g>
          ))}
        </svg>
      </li>
      <li>band: as wide as the vehicles seen</li>
      <li className="flex items-center gap-2">
        <svg aria-hidden="true" width="28" height="12">
          <path d="M0 6H25M25 1V11" stroke={COLORS.tail} strokeWidth="2.25" />
        </svg>
        reach, 95th percentile
      </li>
      <li className="flex items-center gap-2">
        <svg aria-hidden="true" width="10" height="14">
          <path d="M5 0V14" stroke={COLORS.ink} strokeWidth="1.4" strokeDasharray="4 3" />
        </svg>
        storage
      </li>
    </ul>
  );
}

function planSummary(view: JunctionView): string {
  return `Plan of ${view.name}, north up: ${view.legs.map((leg) => leg.name).join("; ")}. The table gives the same figures.`;
}

function lineLength(line: readonly (readonly [number, number])[]): number {
  let length = 0;
  for (let i = 1; i < line.length; i++) length += Math.hypot(line[i][0] - line[i - 1][0], line[i][1] - line[i - 1][1]);
  return length;
}
