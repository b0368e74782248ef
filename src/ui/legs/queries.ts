import { queryOptions } from "@tanstack/react-query";
import type { LegCheckView, LegToCheck, PingCloud, Rematch } from "@/domain/leg-check";
import { getJson } from "@/ui/query-client";

/** How often the state of matching anew is asked after. */
const WHILE_MATCHING_MS = 1_500;

export function isUnderWay(rematch: Rematch | undefined): boolean {
  return rematch === "waiting" || rematch === "running";
}

/** All legs of the city: the list is searched in the browser. */
export function legsToCheckQuery() {
  return queryOptions({
    queryKey: ["legs", "to-check"],
    queryFn: ({ signal }) => getJson<LegToCheck[]>("/api/legs", signal),
  });
}

export function legCheckQuery(junctionId: number) {
  return queryOptions({
    queryKey: ["legs", "check", junctionId],
    queryFn: ({ signal }) => getJson<LegCheckView>(`/api/junctions/${junctionId}/legs`, signal),
    refetchInterval: ({ state }) => (isUnderWay(state.data?.rematch) ? WHILE_MATCHING_MS : false),
  });
}

export function pingCloudQuery(junctionId: number) {
  return queryOptions({
    queryKey: ["legs", "cloud", junctionId],
    queryFn: ({ signal }) => getJson<PingCloud>(`/api/junctions/${junctionId}/cloud`, signal),
    staleTime: 10 * 60_000,
  });
}
