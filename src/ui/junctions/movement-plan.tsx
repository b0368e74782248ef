"use client";

import type { JunctionView } from "@/domain/junction";
import { formatSeconds } from "@/ui/format";
import { COLORS, delayColor, DELAY_SCALE } from "@/ui/scales";
import { TURN_WORDS } from "@/ui/screens/phrases";
import { useCity } from "@/ui/shell/city";
import { FLOW_RADIUS_M, flowsOf, type Flow } from "./plan-flows";
import { planScale } from "./plan-geometry";
import { CrossBar, NorthArrow, ScaleBar, STREET_M, Streets } from "./plan-parts";

const SIZE = 440;
const MARGIN = 30;

/** The junction itself to scale: every movement a band, as wide as the vehicles seen and as dark as their delay. */
export function MovementPlan({ view }: { view: JunctionView }) {
  const { settings, locale } = useCity();
  const scale = planScale(FLOW_RADIUS_M + 6, SIZE, MARGIN);
  // Dark bands last, so that the worst movement is never hidden.
  const flows = flowsOf(view, scale).sort((a, b) => (a.movement.delay?.value ?? -1) - (b.movement.delay?.value ?? -1));
  const legName = new Map(view.legs.map((leg) => [leg.id, leg.name]));
  const label = `Movements of ${view.name}, north up: ${flows.map((flow) => `${TURN_WORDS[flow.movement.turn]} ${legName.get(flow.movement.legId)} ${formatSeconds(flow.movement.delay?.value, locale)}`).join("; ")}.`;
  return (
    <figure className="min-w-0">
      <figcaption className="font-table font-medium">Movements</figcaption>
      <svg viewBox={`0 0 ${SIZE} ${SIZE}`} role="img" aria-label={label} className="h-auto w-full max-w-[30rem] font-table">
        <Streets streets={[...view.legs, ...view.exits]} scale={scale} radiusM={FLOW_RADIUS_M + 4} />
        {flows.map((flow) => (
          <FlowBand key={flow.movement.id} flow={flow} />
        ))}
        {view.legs.map((leg) => (
          <g key={leg.id}>
            <CrossBar leg={leg} scale={scale} atM={0} halfPx={(STREET_M * scale.perM) / 2 + 1} stroke={COLORS.sheet} width={5} />
            <CrossBar leg={leg} scale={scale} atM={0} halfPx={(STREET_M * scale.perM) / 2} stroke={COLORS.ink} width={2.5} />
          </g>
        ))}
        <NorthArrow size={SIZE} />
        <ScaleBar scale={scale} units={settings.units} />
      </svg>
      <p className="flex flex-wrap items-start gap-x-2 font-table text-[0.92rem] text-ink-soft">
        mean delay, s
        <svg aria-hidden="true" width={DELAY_SCALE.length * 30} height="26" className="mt-1.5">
          {DELAY_SCALE.map((step, i) => (
            <g key={step.from}>
              <rect x={i * 30} width="30" height="10" fill={step.color} />
              <text x={i * 30} y="23" fontSize="12" fill={COLORS.inkSoft} textAnchor={i === 0 ? "start" : "middle"}>
                {step.from}
              </text>
            </g>
          ))}
        </svg>
        <span>as wide as the vehicles seen</span>
      </p>
    </figure>
  );
}

function FlowBand({ flow }: { flow: Flow }) {
  const color = delayColor(flow.movement.delay?.value);
  const half = Math.max(5, flow.widthPx * 0.5 + 3);
  const [x, y] = flow.tip;
  return (
    <g>
      <path d={flow.path} fill="none" stroke={COLORS.sheet} strokeWidth={flow.widthPx + 1.8} />
      <path d={flow.path} fill="none" stroke={color} strokeWidth={flow.widthPx} />
      <path d={`M${-half} 0L0 ${-half * 1.4}L${half} 0Z`} transform={`translate(${x.toFixed(1)} ${y.toFixed(1)}) rotate(${flow.headingDeg.toFixed(1)})`} fill={color} stroke={COLORS.sheet} strokeWidth="0.8" />
    </g>
  );
}
