import type { Evidence } from "@/core/types";

/** What the phrases of a sentence may be set to. Free of zod: every page of the browser offers them. */

export const DAY_TYPES = ["weekdays", "saturday", "sunday", "every"] as const;
export type DayType = (typeof DAY_TYPES)[number];

export const DAY_TYPE_NAMES: Record<DayType, string> = {
  weekdays: "weekdays",
  saturday: "Saturdays",
  sunday: "Sundays",
  every: "all days",
};

export const SORT_KEYS = ["rank", "name", "delay", "p95", "hours", "stops", "reach", "storage", "spill", "vehicles", "evidence"] as const;
export type SortKey = (typeof SORT_KEYS)[number];

/** Weakest evidence that is still listed. */
export const EVIDENCE_FLOORS = ["none", "thin", "fair", "strong"] as const satisfies readonly Evidence[];

export const STRIP_SHAPES = ["rectangles", "waves"] as const;
export const SMOOTHING = ["off", "on"] as const;
export const PATHS = ["shown", "hidden"] as const;

/** A strip of more tracks than this would not be drawn any better; of more, the newest days are shown. */
export const MOST_TRACKS = 20_000;
