import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import type { JunctionView, ListedJunction, WhenQuery } from "@/domain/junction";
import { whenQueryToParams } from "@/domain/query-address";
import { getJson } from "@/ui/query-client";

/** All junctions of the city: the list is searched in the browser. */
export function junctionsQuery() {
  return queryOptions({
    queryKey: ["junctions"],
    queryFn: ({ signal }) => getJson<ListedJunction[]>("/api/junctions", signal),
    staleTime: 10 * 60_000,
  });
}

export function junctionQuery(junctionId: number, when: WhenQuery) {
  const params = whenQueryToParams(when).toString();
  return queryOptions({
    queryKey: ["junctions", junctionId, params],
    queryFn: ({ signal }) => getJson<JunctionView>(`/api/junctions/${junctionId}?${params}`, signal),
    placeholderData: keepPreviousData,
  });
}
