import { ScreenQuery, type ScreenResult } from "@/domain/screen";
import { requirePermission, type Context } from "../context";
import { processMemory } from "../process-memory";
import { rowOf } from "./ranked-row";
import { basisOf, scoreCity, type ScoredCity } from "./score-city";

/** The ranked list of the whole city for a window, dates and movement; the other filters choose among its rows. */
export async function rankJunctions(ctx: Context, input: ScreenQuery): Promise<ScreenResult> {
  requirePermission(ctx, "screen.view");
  return rankCity(ctx, ScreenQuery.parse(input));
}

/** The same without the question who asks: for verbs that have asked already. */
export async function rankCity(ctx: Context, query: ScreenQuery): Promise<ScreenResult> {
  return resultOf(await scoreCity(ctx, query));
}

/** By scored city: writing a thousand rows takes longer than finding what they say. */
const remembered = processMemory<ScoredCity, ScreenResult>("rankings");

function resultOf(scored: ScoredCity): ScreenResult {
  const known = remembered.get(scored) ?? rank(scored);
  remembered.set(scored, known);
  return known;
}

function rank(scored: ScoredCity): ScreenResult {
  const rows = [...scored.catalogue.junctions.values()].map((junction) => rowOf(junction, scored));
  rows.sort((a, b) => (a.rank ?? Infinity) - (b.rank ?? Infinity) || a.name.localeCompare(b.name) || a.junctionId - b.junctionId);
  return { rows, total: rows.length, basis: basisOf(scored) };
}
