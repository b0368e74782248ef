import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import { decodeTrackSet } from "@/core/strips/track-set";
import type { LegStripView, StripQuery } from "@/domain/junction";
import { stripQueryToParams, USUAL_STRIP, whenQueryToParams } from "@/domain/query-address";
import { getBytes, getJson } from "@/ui/query-client";

/** What decides the figures: how the cells are cut and drawn is done in the browser and fetches nothing. */
export function figuresParams(query: StripQuery): string {
  const { period, from, to, days, since, until, turn } = query;
  return stripQueryToParams({ ...USUAL_STRIP, period, from, to, days, since, until, turn }).toString();
}

/** What decides the tracks. Movements are told apart in the browser, since a queue holds all of them. */
export function tracksParams(query: StripQuery): string {
  const params = whenQueryToParams(query);
  if (query.day !== undefined) params.set("day", query.day);
  return params.toString();
}

export function legStripQuery(legId: number, query: StripQuery) {
  const params = figuresParams(query);
  return queryOptions({
    queryKey: ["legs", legId, "strip", params],
    queryFn: ({ signal }) => getJson<LegStripView>(`/api/legs/${legId}?${params}`, signal),
    placeholderData: keepPreviousData,
  });
}

export function tracksQuery(legId: number, query: StripQuery) {
  const params = tracksParams(query);
  return queryOptions({
    queryKey: ["legs", legId, "tracks", params],
    queryFn: async ({ signal }) => decodeTrackSet(await getBytes(`/api/legs/${legId}/tracks?${params}`, signal)),
    staleTime: 10 * 60_000,
  });
}
