import type { Random } from "@/core/stats/random";
import type { Role } from "@/domain/actor";
import { DAY_TYPES } from "@/domain/screen-choices";
import { PERIOD_KEYS } from "@/domain/periods";

export interface City {
  junctionIds: readonly number[];
  legIds: readonly number[];
}

const TURNS = ["any", "through", "left", "right"] as const;

/** What a person of the role asks for next: addresses that a browser fetches at once. */
export function nextAct(role: Role, city: City, random: Random): string[] {
  const pick = <T>(values: readonly T[]): T => values[Math.floor(random() * values.length)];
  const when = `period=${pick(PERIOD_KEYS)}&days=${pick(DAY_TYPES)}`;
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
  if (chance < 0.65) return [`/api/screen?${when}&turn=${pick(TURNS)}`];
  if (chance < 0.8) return [`/junctions/${junction}?${when}`, `/api/junctions/${junction}?${when}`];
  return [`/api/legs/${leg}?${when}`, `/api/legs/${leg}/tracks?${when}`];
}
