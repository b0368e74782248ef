/** A feature that is a point, or what is left of one. */
export interface PointFeature {
  properties: Record<string, unknown>;
  lat: number;
  lon: number;
}

/** Null where the text is no JSON object; latitude and longitude are NaN where there is no point. */
export function pointFeature(text: string): PointFeature | null {
  const feature = parsedObject(text);
  if (feature === null) return null;
  const geometry = asObject(feature.geometry);
  const isPoint = geometry?.type === "Point" && Array.isArray(geometry.coordinates);
  const coordinates: unknown[] = isPoint ? (geometry.coordinates as unknown[]) : [];
  const [lon, lat] = coordinates;
  return {
    properties: asObject(feature.properties) ?? {},
    lat: typeof lat === "number" ? lat : NaN,
    lon: typeof lon === "number" ? lon : NaN,
  };
}

/** Text of a property; empty where it is missing or not a plain value. */
export function propertyText(properties: Record<string, unknown>, name: string | null): string {
  const value = name === null ? undefined : properties[name];
  if (typeof value === "string") return value.trim();
  return typeof value === "number" || typeof value === "boolean" ? String(value) : "";
}

export function parsedObject(text: string): Record<string, unknown> | null {
  try {
    return asObject(JSON.parse(text));
  } catch {
    return null;
  }
}

export function asObject(value: unknown): Record<string, unknown> | null {
  return typeof value === "object" && value !== null && !Array.isArray(value) ? (value as Record<string, unknown>) : null;
}
