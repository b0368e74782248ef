/** Times of day that a city gives names to. Free of zod: every page of the browser knows them. */

export const PERIOD_KEYS = ["am", "midday", "pm", "evening", "all"] as const;
export type PeriodKey = (typeof PERIOD_KEYS)[number];

export const PERIOD_NAMES: Record<PeriodKey, string> = {
  am: "AM peak",
  midday: "midday",
  pm: "PM peak",
  evening: "evening",
  all: "all day",
};

/** Minutes after local midnight, in quarters of an hour; `to` is exclusive. */
export interface TimeWindow {
  fromMin: number;
  toMin: number;
}

export function periodWindow(settings: { periods: Record<Exclude<PeriodKey, "all">, TimeWindow> }, key: PeriodKey): TimeWindow {
  return key === "all" ? { fromMin: 0, toMin: 1440 } : settings.periods[key];
}
