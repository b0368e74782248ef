import { scoreProfile, type ProfileQuarter } from "@/core/scores/score-profile";
import type { ScoredCity } from "./score-city";

const MAX_REMEMBERED = 500;
/** By scored city, so that profiles of former data go with it. */
const remembered = new WeakMap<ScoredCity, Map<string, ProfileQuarter[]>>();

/** Profile of a junction's or a leg's day: all cells of the city are walked for it, once for each state of the data. */
export function profileOf(scored: ScoredCity, movements: readonly { id: number }[], legs: readonly number[]): ProfileQuarter[] {
  let known = remembered.get(scored);
  if (!known) remembered.set(scored, (known = new Map()));
  const of = { movements: movements.map((movement) => movement.id), legs: [...legs] };
  const key = JSON.stringify(of);
  const hit = known.get(key);
  if (hit) return hit;
  const profile = scoreProfile(scored.data.days, of);
  if (known.size >= MAX_REMEMBERED) known.delete(known.keys().next().value as string);
  known.set(key, profile);
  return profile;
}
