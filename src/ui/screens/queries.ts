import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import { screenQueryToParams, USUAL_SCREEN } from "@/domain/query-address";
import type { CorridorName, ScreenQuery, ScreenResult } from "@/domain/screen";
import { getJson } from "@/ui/query-client";

/** What decides the figures: filters that only choose among rows are left out, so that dragging them fetches nothing. */
export function figuresParams(query: ScreenQuery): string {
  const { period, from, to, days, since, until, turn } = query;
  return screenQueryToParams({ ...USUAL_SCREEN, period, from, to, days, since, until, turn }).toString();
}

export function screenQuery(query: ScreenQuery) {
  const params = figuresParams(query);
  return queryOptions({
    queryKey: ["screen", params],
    queryFn: ({ signal }) => getJson<ScreenResult>(`/api/screen?${params}`, signal),
    placeholderData: keepPreviousData,
  });
}

export function corridorsQuery() {
  return queryOptions({
    queryKey: ["corridors"],
    queryFn: ({ signal }) => getJson<CorridorName[]>("/api/corridors", signal),
    staleTime: 10 * 60_000,
  });
}
