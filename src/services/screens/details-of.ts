import { legDetail, movementDetail } from "@/core/scores/score-detail";
import { scoreProfile, type ProfileQuarter } from "@/core/scores/score-profile";
import type { LegDetail, MovementDetail } from "@/core/scores/types";
import type { Context } from "../context";
import { processMemory } from "../process-memory";
import type { ScoredCity, WhenAndTurn } from "./score-city";
import { loadScreenDays } from "./screen-data";

/** What the page of a junction or leg shows beside its scores. */
export interface Details {
  profile: ProfileQuarter[];
  movements: Map<number, MovementDetail>;
  legs: Map<number, LegDetail>;
}

const MAX_REMEMBERED = 200;
/** By scored city, so that details of former data go with it. */
const remembered = processMemory<ScoredCity, Map<string, Details>>("details");

/** Movements that the turn leaves out of the scores have no details. Rows of a few movements and legs are walked for it. */
export async function detailsOf(ctx: Context, when: WhenAndTurn, scored: ScoredCity, movements: readonly { id: number }[], legs: readonly number[]): Promise<Details> {
  const known = remembered.get(scored) ?? new Map<string, Details>();
  remembered.set(scored, known);
  const of = { movements: movements.map((movement) => movement.id), legs: [...legs] };
  const key = JSON.stringify(of);
  const hit = known.get(key);
  if (hit) return hit;
  const { days } = await loadScreenDays(ctx.db, when, scored.catalogue);
  const window = { fromQuarter: scored.window.fromMin / 15, toQuarter: scored.window.toMin / 15 };
  const counted = of.movements.filter((id) => (scored.scores.movement(id)?.vehicles ?? 0) > 0);
  const details: Details = {
    profile: scoreProfile(days, of),
    movements: new Map(counted.map((id) => [id, movementDetail(days, id, window)])),
    legs: new Map(of.legs.map((id) => [id, legDetail(days, id, window)])),
  };
  if (known.size >= MAX_REMEMBERED) known.delete(known.keys().next().value as string);
  known.set(key, details);
  return details;
}
