import { queryOptions } from "@tanstack/react-query";
import type { FeatureCollection, LineString, Point, Polygon } from "geojson";
import { getJson, RequestError } from "@/ui/query-client";
import { boundsOf, overlap, type Bounds } from "./needles";

export interface BaseMap {
  streets: FeatureCollection<LineString, { name: string; class: string }>;
  water: FeatureCollection<Polygon | LineString, { kind: string; name: string }>;
  parks: FeatureCollection<Polygon, { name: string }>;
  labels: FeatureCollection<Point, { kind: string; name: string }>;
  bounds: Bounds;
}

const SHEETS = ["streets", "water", "parks", "labels"] as const;

/** The city's own drawing from this server; null where it has none. */
export function baseMapQuery() {
  return queryOptions({ queryKey: ["base-map"], queryFn: ({ signal }) => readBaseMap(signal), staleTime: Infinity });
}

async function readBaseMap(signal: AbortSignal): Promise<BaseMap | null> {
  try {
    const [streets, water, parks, labels] = await Promise.all(SHEETS.map((name) => getJson<FeatureCollection>(`/map/${name}.geojson`, signal)));
    const points = (streets as BaseMap["streets"]).features.flatMap(({ geometry }) => geometry.coordinates.map(([lon, lat]) => ({ lat, lon })));
    const bounds = boundsOf(points);
    return bounds && ({ streets, water, parks, labels, bounds } as BaseMap);
  } catch (error) {
    if (error instanceof RequestError && error.status === 404) return null;
    throw error;
  }
}

/** A base map of another place is none. */
export function baseMapFor(baseMap: BaseMap | null | undefined, city: Bounds | null): BaseMap | null {
  return baseMap && city && overlap(baseMap.bounds, city) ? baseMap : null;
}
