import { asObject, parsedObject } from "./point-feature";

/** A feature that is a line, or what is left of one. */
export interface LineFeature {
  properties: Record<string, unknown>;
  /** Null where there is no line of at least two points. */
  lat: Float64Array | null;
  lon: Float64Array | null;
}

/** Null where the text is no JSON object. A MultiLineString of one part is a line. */
export function lineFeature(text: string): LineFeature | null {
  const feature = parsedObject(text);
  if (feature === null) return null;
  const points = pointsOf(asObject(feature.geometry));
  return {
    properties: asObject(feature.properties) ?? {},
    lat: points && Float64Array.from(points, ([, lat]) => lat),
    lon: points && Float64Array.from(points, ([lon]) => lon),
  };
}

function pointsOf(geometry: Record<string, unknown> | null): [number, number][] | null {
  const coordinates = geometry?.coordinates;
  if (!Array.isArray(coordinates)) return null;
  const line: unknown = geometry?.type === "MultiLineString" && coordinates.length === 1 ? coordinates[0] : coordinates;
  const isLine = geometry?.type === "LineString" || geometry?.type === "MultiLineString";
  if (!isLine || !Array.isArray(line) || line.length < 2) return null;
  return line.every(isPoint) ? line : null;
}

function isPoint(point: unknown): point is [number, number] {
  return Array.isArray(point) && typeof point[0] === "number" && typeof point[1] === "number";
}
