"use client";

import { useRef } from "react";
import type { ProfilePoint } from "@/domain/junction";
import { formatClock, formatShare } from "@/ui/format";
import { COLORS } from "@/ui/scales";
import { useCity } from "@/ui/shell/city";
import { delayTicks, delayTop, losBands, spreadUpwards } from "@/ui/strips/draw-delay";
import { FiguresByTime, type DelayStep } from "@/ui/strips/figures-by-time";
import { timeTicks } from "@/ui/strips/strip-layout";
import { useBoxWidth } from "@/ui/strips/use-box-width";
import { profileRuns, type ProfileRun } from "./profile-runs";

const HEIGHT = 356;
const TOP = 10;
const PLOT = 262;
const BARS = 38;
const LEFT = 46;
const RIGHT = 40;
const QUARTER_MIN = 15;
const HEADS = [{ head: "spills back", numeric: true }];

/** Delay by time of day with its band, the chosen hours marked, and below it how many vehicles it rests on. */
export function DayProfile({ profile, fromMin, toMin }: { profile: ProfilePoint[]; fromMin: number; toMin: number }) {
  const box = useRef<HTMLDivElement>(null);
  const { width } = useBoxWidth(box);
  return (
    <div>
      <div ref={box} className="min-w-0" style={{ height: HEIGHT }}>
        {width > 0 ? <ProfileChart profile={profile} fromMin={fromMin} toMin={toMin} width={width} /> : null}
      </div>
      <ProfileTable profile={profile} />
    </div>
  );
}

function ProfileChart({ profile, fromMin, toMin, width }: { profile: ProfilePoint[]; fromMin: number; toMin: number; width: number }) {
  const known = profile.flatMap((point) => (point.delay ? [point.delay] : []));
  const topS = delayTop(
    known.map((delay) => delay.value),
    known.map((delay) => delay.high),
  );
  const plotWidth = Math.max(60, width - LEFT - RIGHT);
  const x = (minutes: number) => LEFT + (plotWidth * minutes) / 1440;
  const y = (seconds: number) => TOP + PLOT * (1 - Math.min(topS, Math.max(0, seconds)) / topS);
  const bands = losBands(topS);
  const places = spreadUpwards(
    bands.map((band) => (y(band.fromS) + y(band.toS)) / 2),
    19,
    TOP + PLOT,
  );
  const most = Math.max(1, ...profile.map((point) => point.vehicles));
  const barsFoot = TOP + PLOT + 12 + BARS;
  return (
    <svg role="img" aria-label="Mean delay by quarter of an hour; the table below holds the figures" width={width} height={HEIGHT} className="block font-table">
      <rect x={x(fromMin)} y={TOP} width={x(toMin) - x(fromMin)} height={PLOT + 12 + BARS} fill={COLORS.pickWash} />
      {bands.map((band, k) => (
        <g key={band.letter}>
          <line x1={LEFT} x2={LEFT + plotWidth} y1={y(band.fromS)} y2={y(band.fromS)} stroke={COLORS.rule} />
          <line x1={LEFT + plotWidth + 1} y1={(y(band.fromS) + y(band.toS)) / 2} x2={LEFT + plotWidth + 14} y2={places[k]} stroke={COLORS.rule} />
          <rect x={LEFT + plotWidth + 14.5} y={Math.round(places[k]) - 7.5} width="16" height="16" fill={COLORS.sheet} stroke={COLORS.ink} strokeWidth="1.25" />
          <text x={LEFT + plotWidth + 22.5} y={Math.round(places[k]) + 5} textAnchor="middle" fontSize="12" fontWeight="600" fill={COLORS.ink}>
            {band.letter}
          </text>
        </g>
      ))}
      {delayTicks(topS, PLOT, 13).map((value) => (
        <g key={value}>
          {bands.some((band) => band.fromS === value) ? null : <line x1={LEFT} x2={LEFT + plotWidth} y1={y(value)} y2={y(value)} stroke={COLORS.rule} />}
          <text x={LEFT - 8} y={y(value) + 4.5} textAnchor="end" fontSize="13" fill={COLORS.inkSoft}>
            {value}
          </text>
        </g>
      ))}
      {profileRuns(profile).map((run) => (
        <Run key={run[0].fromMin} run={run} x={x} y={y} />
      ))}
      {profile.map((point) => (
        <rect
          key={point.fromMin}
          x={x(point.fromMin) + 0.5}
          width={Math.max(0.8, plotWidth / 96 - 1)}
          y={barsFoot - (BARS * point.vehicles) / most}
          height={(BARS * point.vehicles) / most}
          fill="#A9AFC0"
        />
      ))}
      <line x1={LEFT} x2={LEFT + plotWidth} y1={barsFoot} y2={barsFoot} stroke={COLORS.ink} />
      {timeTicks({ fromS: 0, toS: 86_400 }, plotWidth, 62).map((tS) => (
        <g key={tS}>
          <line x1={x(tS / 60)} x2={x(tS / 60)} y1={barsFoot} y2={barsFoot + 5} stroke={COLORS.ink} />
          <text x={Math.min(x(tS / 60), width - 18)} y={barsFoot + 18} textAnchor="middle" fontSize="13" fill={COLORS.inkSoft}>
            {formatClock(tS / 60)}
          </text>
        </g>
      ))}
      <text transform={`translate(11 ${TOP + PLOT / 2}) rotate(-90)`} textAnchor="middle" fontSize="13" fill={COLORS.inkSoft}>
        delay, s/veh
      </text>
      <text x={LEFT - 8} y={barsFoot - BARS + 9} textAnchor="end" fontSize="13" fill={COLORS.inkSoft}>
        {most}
      </text>
      <text x={LEFT - 8} y={barsFoot + 1} textAnchor="end" fontSize="13" fill={COLORS.inkSoft}>
        veh
      </text>
    </svg>
  );
}

function Run({ run, x, y }: { run: ProfileRun; x: (minutes: number) => number; y: (seconds: number) => number }) {
  const middle = (point: ProfileRun[number]) => x(point.fromMin + 7.5).toFixed(1);
  const line = run.map((point) => `${middle(point)},${y(point.value).toFixed(1)}`).join(" ");
  const back = run.toReversed().map((point) => `${middle(point)},${y(point.low).toFixed(1)}`);
  const band = [...run.map((point) => `${middle(point)},${y(point.high).toFixed(1)}`), ...back].join(" ");
  return (
    <>
      <polygon points={band} fill="#DFD2B8" fillOpacity="0.75" />
      {run.length === 1 ? <rect x={x(run[0].fromMin + 7.5) - 2} y={y(run[0].value) - 2} width="4" height="4" fill={COLORS.ink} /> : null}
      <polyline points={line} fill="none" stroke={COLORS.ink} strokeWidth="2" strokeLinejoin="round" />
    </>
  );
}

function ProfileTable({ profile }: { profile: ProfilePoint[] }) {
  const { locale } = useCity();
  const steps = profile
    .filter(({ vehicles }) => vehicles > 0)
    .map(({ fromMin, vehicles, delay, spill }): DelayStep => ({ fromMin, toMin: fromMin + QUARTER_MIN, vehicles, delay, more: [formatShare(spill, locale)] }));
  return <FiguresByTime caption="Delay by time of day" moreHeads={HEADS} steps={steps} className="pt-1" />;
}
