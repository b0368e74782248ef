import { screenQueryFromParams, screenQueryToParams, whenQueryToParams } from "@/domain/query-address";
import type { ScreenQuery } from "@/domain/screen";

/** What the address of the screen page holds: the query, and the junction that is selected. */
export interface ScreenAddress {
  query: ScreenQuery;
  at: number | null;
}

export function screenAddressFromParams(params: URLSearchParams): ScreenAddress {
  const at = Number(params.get("at"));
  return { query: screenQueryFromParams(Object.fromEntries(params)), at: Number.isInteger(at) && at > 0 ? at : null };
}

export function screenAddressToParams({ query, at }: ScreenAddress): URLSearchParams {
  const params = screenQueryToParams(query);
  if (at !== null) params.set("at", String(at));
  return params;
}

/** The part that a junction page or a leg strip is opened with, as "?…" or nothing. */
export function whenSuffix(query: ScreenQuery): string {
  const all = whenQueryToParams(query).toString();
  return all ? `?${all}` : "";
}
