import { queryOptions } from "@tanstack/react-query";
import type { FeatureCollection, Geometry } from "geojson";
import { getJson, RequestError } from "@/ui/query-client";
import { boundsOf, overlap, type Bounds } from "./needles";

export interface BaseMap {
  /** All that the city's drawing holds, each feature with its `sheet`. */
  ground: FeatureCollection<Geometry, { sheet: Sheet; name: string }>;
  bounds: Bounds;
}

export const SHEETS = ["streets", "water", "parks", "labels"] as const;
export type Sheet = (typeof SHEETS)[number];

/** The city's own drawing from this server; null where it has none. */
export function baseMapQuery() {
  return queryOptions({ queryKey: ["base-map"], queryFn: ({ signal }) => readBaseMap(signal), staleTime: Infinity });
}

async function readBaseMap(signal: AbortSignal): Promise<BaseMap | null> {
  try {
    const sheets = await Promise.all(SHEETS.map((name) => getJson<FeatureCollection<Geometry, { name: string }>>(`/map/${name}.geojson`, signal)));
    const bounds = boundsOf(sheets[0].features.flatMap(({ geometry }) => pointsOf(geometry)));
    return bounds && { ground: onePicture(sheets), bounds };
  } catch (error) {
    if (error instanceof RequestError && error.status === 404) return null;
    throw error;
  }
}

/** In one source: for each of them the map library masks the whole window anew. */
function onePicture(sheets: readonly FeatureCollection<Geometry, { name: string }>[]): BaseMap["ground"] {
  const features = sheets.flatMap((sheet, at) => sheet.features.map((feature) => ({ ...feature, properties: { ...feature.properties, sheet: SHEETS[at] } })));
  return { type: "FeatureCollection", features };
}

function pointsOf(street: Geometry): { lat: number; lon: number }[] {
  return street.type === "LineString" ? street.coordinates.map(([lon, lat]) => ({ lat, lon })) : [];
}

/** A base map of another place is none. */
export function baseMapFor(baseMap: BaseMap | null | undefined, city: Bounds | null): BaseMap | null {
  return baseMap && city && overlap(baseMap.bounds, city) ? baseMap : null;
}
