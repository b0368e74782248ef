import type { Zone } from "./routes";

export const PERIODS = ["am", "midday", "pm"] as const;
export type Period = (typeof PERIODS)[number];
export type DayKind = "weekday" | "saturday";

export interface Window {
  period: Period;
  /** Local minutes after midnight. */
  startMin: number;
  endMin: number;
}

/** The hours for which the supplier delivers pings. */
export const WINDOWS: Window[] = [
  { period: "am", startMin: 390, endMin: 570 },
  { period: "midday", startMin: 690, endMin: 810 },
  { period: "pm", startMin: 930, endMin: 1140 },
];

/** Share of the period's peak rate, by local minutes after midnight; straight lines between. */
const PROFILES: Record<DayKind, Record<Period, [minute: number, share: number][]>> = {
  weekday: {
    am: [[360, 0.35], [400, 0.55], [450, 0.95], [465, 1], [520, 1], [540, 0.85], [570, 0.65]],
    midday: [[660, 0.9], [720, 1], [780, 1], [810, 0.9]],
    pm: [[900, 0.6], [930, 0.68], [985, 0.93], [1005, 1], [1065, 1], [1090, 0.85], [1140, 0.55]],
  },
  saturday: {
    am: [[360, 0.2], [420, 0.28], [480, 0.4], [570, 0.62]],
    midday: [[660, 1], [705, 1.12], [780, 1.15], [810, 1.05]],
    pm: [[900, 0.72], [960, 0.7], [1020, 0.64], [1140, 0.48]],
  },
};

export function shareOfPeak(day: DayKind, period: Period, minute: number): number {
  const profile = PROFILES[day][period];
  if (minute <= profile[0][0]) return profile[0][1];
  for (let i = 1; i < profile.length; i++) {
    const [m1, s1] = profile[i];
    if (minute > m1) continue;
    const [m0, s0] = profile[i - 1];
    return s0 + ((s1 - s0) * (minute - m0)) / (m1 - m0);
  }
  return profile[profile.length - 1][1];
}

const CORE_RADIUS_M = 1300;
/** How much more a zone in the core sends and draws than one outside. */
const CORE_PULL: Record<Period, { sends: number; draws: number }> = {
  am: { sends: 0.55, draws: 2.6 },
  midday: { sends: 1.5, draws: 1.6 },
  pm: { sends: 2.6, draws: 0.6 },
};
const DECAY_M = 3200;
const SHORTEST_TRIP_M = 700;

/** Gravity model: how many trips one zone sends to another, up to a common factor. */
export function attraction(period: Period, from: Zone, to: Zone, shortestM: number): number {
  if (from === to || from.inLink < 0 || to.outLink < 0) return 0;
  const apartM = Math.hypot(from.point[0] - to.point[0], from.point[1] - to.point[1]);
  if (apartM < shortestM) return 0;
  const isCore = (zone: Zone) => Math.hypot(zone.point[0], zone.point[1] - 200) < CORE_RADIUS_M;
  const sends = from.weight * (isCore(from) ? CORE_PULL[period].sends : 1);
  const draws = to.weight * (isCore(to) ? CORE_PULL[period].draws : 1);
  return sends * draws * Math.exp(-apartM / DECAY_M);
}

export function shortestTripM(scale: "demo" | "small"): number {
  return scale === "small" ? 450 : SHORTEST_TRIP_M;
}
