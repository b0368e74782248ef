import { METHOD_VERSION } from "@/core/method-version";
import { scoreScreen } from "@/core/scores/score-screen";
import type { JunctionScore, ScreenScores } from "@/core/scores/types";
import { AppError } from "@/domain/errors";
import { isoFromDay } from "@/domain/local-time";
import type { ScreenQuery, ScreenResult } from "@/domain/screen";
import { periodWindow, type TimeWindow } from "@/domain/periods";
import type { CitySettings } from "@/domain/settings";
import { cityCatalogue, type CityCatalogue } from "../catalogue/catalogue";
import type { Context } from "../context";
import { processMemory } from "../process-memory";
import { getSettings } from "../settings/get-settings";
import { loadScreenDays, type ScreenDays } from "./screen-data";

export interface ScoredCity {
  catalogue: CityCatalogue;
  scores: ScreenScores;
  /** What the figures rest on; the slices themselves are held elsewhere. */
  data: Omit<ScreenDays, "days"> & { dayCount: number };
  window: TimeWindow;
  settings: CitySettings;
  junctionScores: Map<number, JunctionScore>;
}

const MAX_REMEMBERED = 40;
const remembered = processMemory<object, Map<string, { version: number; scored: Promise<ScoredCity> }>>("scored cities");

export type WhenAndTurn = Pick<ScreenQuery, "period" | "from" | "to" | "days" | "since" | "until" | "turn">;

export async function scoreCity(ctx: Context, query: WhenAndTurn): Promise<ScoredCity> {
  const settings = await getSettings(ctx);
  const catalogue = await cityCatalogue(ctx.db);
  const window = windowOf(settings, query);
  const key = [catalogue.version, window.fromMin, window.toMin, query.days, query.since, query.until, query.turn].join("|");
  let known = remembered.get(ctx.db);
  if (!known) remembered.set(ctx.db, (known = new Map()));
  const hit = known.get(key);
  if (hit) {
    // The one that was asked for longest ago goes first.
    known.delete(key);
    known.set(key, hit);
    return hit.scored;
  }
  // Nobody asks for scores of former data again.
  for (const [former, { version }] of known) if (version < catalogue.version) known.delete(former);
  if (known.size >= MAX_REMEMBERED) known.delete(known.keys().next().value as string);
  // Before it is there: who asks meanwhile waits for the same.
  const scored = score(ctx, query, { settings, catalogue, window });
  known.set(key, { version: catalogue.version, scored });
  scored.catch(() => known.delete(key));
  return scored;
}

async function score(ctx: Context, query: WhenAndTurn, { settings, catalogue, window }: Pick<ScoredCity, "settings" | "catalogue" | "window">): Promise<ScoredCity> {
  const { days, ...data } = await loadScreenDays(ctx.db, query, catalogue);
  const scores = scoreScreen(days, catalogue.keys, {
    fromQuarter: window.fromMin / 15,
    toQuarter: window.toMin / 15,
    turn: query.turn === "any" ? null : query.turn,
  });
  return {
    catalogue,
    scores,
    data: { ...data, dayCount: days.length },
    window,
    settings,
    junctionScores: new Map(scores.junctions.map((score) => [score.junction, score])),
  };
}

export function windowOf(settings: CitySettings, query: WhenAndTurn): TimeWindow {
  if (query.from !== undefined && query.to !== undefined) {
    if (query.from >= query.to) throw new AppError("invalid", "The hours must end after they begin.");
    return { fromMin: query.from, toMin: query.to };
  }
  return periodWindow(settings, query.period);
}

export function basisOf(scored: ScoredCity): ScreenResult["basis"] {
  const { data, scores, window } = scored;
  return {
    firstDate: data.firstDay === null ? null : isoFromDay(data.firstDay),
    lastDate: data.lastDay === null ? null : isoFromDay(data.lastDay),
    days: data.dayCount,
    traversals: scores.traversals,
    medianIntervalS: data.medianIntervalS,
    methodVersion: METHOD_VERSION,
    fromMin: window.fromMin,
    toMin: window.toMin,
    ...(data.waitingFiles > 0 && { waitingFiles: data.waitingFiles }),
    ...(data.daysLeftOut > 0 && { daysLeftOut: data.daysLeftOut }),
  };
}
