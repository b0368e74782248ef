import type { Turn } from "@/core/types";
import type { ScreenQuery, ScreenResult } from "@/domain/screen";
import { DAY_TYPE_NAMES, type SortKey } from "@/domain/screen-choices";
import { PERIOD_NAMES } from "@/domain/periods";
import { formatClockRange, formatDay, formatDayRange } from "@/ui/format";

/** The words of the sentence, one function for each phrase that is a control. */

export const TURN_PHRASES: Record<Turn | "any", string> = {
  any: "any movement",
  left: "left turns",
  through: "through traffic",
  right: "right turns",
  uturn: "U-turns",
};

export const TURN_WORDS: Record<Turn, string> = { left: "left", through: "through", right: "right", uturn: "U-turn" };

export const EVIDENCE_PHRASES: Record<ScreenQuery["evidence"], string> = {
  none: "any evidence or none",
  thin: "at least thin evidence",
  fair: "fair or strong evidence",
  strong: "strong evidence",
};

interface SortWords {
  phrase: string;
  /** Said before the phrase, in the usual direction and against it. */
  usual: string;
  reversed: string;
}

const BADNESS = { usual: "worst first by", reversed: "best first by" };
const AMOUNT = { usual: "most first by", reversed: "fewest first by" };

export const SORT_WORDS: Record<SortKey, SortWords> = {
  rank: { phrase: "rank", ...BADNESS },
  delay: { phrase: "mean delay", ...BADNESS },
  p95: { phrase: "95th percentile delay", ...BADNESS },
  hours: { phrase: "hours of delay seen", ...BADNESS },
  stops: { phrase: "stops per vehicle", ...BADNESS },
  reach: { phrase: "reach", usual: "longest first by", reversed: "shortest first by" },
  storage: { phrase: "storage taken", ...BADNESS },
  spill: { phrase: "spillback", ...BADNESS },
  evidence: { phrase: "evidence", usual: "strongest first by", reversed: "thinnest first by" },
  vehicles: { phrase: "vehicles seen", ...AMOUNT },
  name: { phrase: "name", usual: "in order of", reversed: "in reverse order of" },
};

/** "weekdays, 2 to 6 March 2026": the dates that the figures rest on, or that were asked for where there are none. */
export function daysPhrase(query: Pick<ScreenQuery, "days" | "since" | "until">, basis: ScreenResult["basis"] | undefined, locale: string): string {
  const first = query.since ?? basis?.firstDate;
  const last = query.until ?? basis?.lastDate;
  const days = DAY_TYPE_NAMES[query.days];
  if (!first && !last) return days;
  if (!first || !last) return first ? `${days} from ${formatDay(first, locale)}` : `${days} until ${formatDay(last ?? "", locale)}`;
  return first > last ? `${days}, no dates` : `${days}, ${formatDayRange(first, last, locale)}`;
}

/** The word before the hours, with its space. */
export function windowPreposition(query: Pick<ScreenQuery, "period" | "from">): string {
  if (query.from !== undefined) return "from ";
  if (query.period === "all") return "";
  return query.period === "midday" ? "at " : "in the ";
}

export function windowPhrase(query: Pick<ScreenQuery, "period" | "from" | "to">, window: { fromMin: number; toMin: number }): string {
  const clock = formatClockRange(window.fromMin, window.toMin);
  if (query.from !== undefined) return clock;
  return query.period === "all" ? PERIOD_NAMES.all : `${PERIOD_NAMES[query.period]}, ${clock}`;
}

export function minDelayPhrase(minDelayS: number): string {
  return minDelayS > 0 ? `by ${minDelayS} s or more` : "by any time";
}

export function minSpillPhrase(minSpillPercent: number): string {
  return minSpillPercent > 0 ? `${minSpillPercent} % of the time or more` : "or not";
}
