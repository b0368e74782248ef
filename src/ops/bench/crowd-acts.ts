import type { Random } from "@/core/stats/random";
import type { Role } from "@/domain/actor";
import { DAY_TYPES } from "@/domain/screen-choices";
import type { PeriodKey } from "@/domain/periods";

export interface City {
  junctionIds: readonly number[];
  legIds: readonly number[];
}

/** Each list from what most people look at most of the time. */
const PERIODS = ["pm", "am", "all", "midday", "evening"] as const satisfies readonly PeriodKey[];
const TURNS = ["any", "left", "through", "right"] as const;

/** What a person of the role asks for next: addresses that a browser fetches at once. */
export function nextAct(role: Role, city: City, random: Random): string[] {
  const pick = <T>(values: readonly T[]): T => values[Math.floor(random() * values.length)];
  const when = `period=${pickUsual(PERIODS, random)}&days=${pickUsual(DAY_TYPES, random)}`;
  const junction = pick(city.junctionIds);
  const leg = pick(city.legIds);
  const chance = random();
  if (role === "reader") return chance < 0.7 ? ["/hotspots"] : ["/api/hotspots"];
  if (role === "technician") {
    if (chance < 0.2) return ["/junctions"];
    if (chance < 0.5) return [`/junctions/${junction}?${when}`];
    return [`/legs/${leg}?${when}`, `/api/legs/${leg}?${when}`, `/api/legs/${leg}/tracks?${when}`];
  }
  if (chance < 0.15) return [`/screen?${when}`];
  if (chance < 0.65) return [`/api/screen?${when}&turn=${pickUsual(TURNS, random)}`];
  if (chance < 0.8) return [`/junctions/${junction}?${when}`, `/api/junctions/${junction}?${when}`];
  return [`/api/legs/${leg}?${when}`, `/api/legs/${leg}/tracks?${when}`];
}

/** The first of n with a chance of about the root of 1 / n, the others ever less often. */
function pickUsual<T>(values: readonly T[], random: Random): T {
  return values[Math.floor(random() ** 2 * values.length)];
}
