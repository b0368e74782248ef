import { neededFields, type FileMapping, type UploadKind } from "@/domain/upload";

/** What a field is called above a column. */
const FIELD_NAMES: Record<string, string> = {
  vehicle_id: "vehicle",
  timestamp: "time",
  lat: "latitude",
  lon: "longitude",
  speed: "speed",
  heading: "heading",
  trip_id: "trip",
  junction_id: "identifier",
  name: "name",
  corridor: "corridor",
  corridor_order: "place on the corridor",
  district: "district",
  cycle_s: "cycle length, s",
  last_retimed: "last retimed",
  notes: "notes",
  speed_limit_kmh: "speed limit, km/h",
  storage_m: "storage, m",
  lanes: "lanes",
};

export function fieldName(field: string): string {
  return FIELD_NAMES[field] ?? field;
}

/** How a mapping names column `at` of the preview. */
function columnKey(mapping: FileMapping, header: readonly string[], at: number): number | string {
  return mapping.format === "csv" ? at : header[at];
}

/** The field that column `at` of the preview is used as; empty where it is not used. */
export function fieldOfColumn(mapping: FileMapping, header: readonly string[], at: number): string {
  const key = columnKey(mapping, header, at);
  return Object.keys(mapping.columns).find((field) => mapping.columns[field] === key) ?? "";
}

/** Uses column `at` as `field`; the column that had the field before goes unused, and so does the column's former field. */
export function withColumnAs(mapping: FileMapping, header: readonly string[], at: number, field: string): FileMapping {
  const key = columnKey(mapping, header, at);
  const kept = Object.entries(mapping.columns).filter(([name, column]) => name !== field && column !== key);
  return { ...mapping, columns: Object.fromEntries(field === "" ? kept : [...kept, [field, key]]) };
}

export function missingFields(mapping: FileMapping, kind: UploadKind): string[] {
  return neededFields(kind, mapping.format).filter((field) => mapping.columns[field] === undefined);
}

/** "latitude", "latitude and longitude", "time, latitude and longitude". */
export function fieldList(fields: readonly string[]): string {
  const names = fields.map(fieldName);
  return names.length < 2 ? names.join("") : `${names.slice(0, -1).join(", ")} and ${names[names.length - 1]}`;
}

/** A supplier's mapping if it fits the file at hand: same format and shape, and no column beyond the file's. */
export function remembered(mapping: FileMapping | null, detected: FileMapping, header: readonly string[]): FileMapping | null {
  if (mapping === null || mapping.format !== detected.format) return null;
  if (mapping.format === "csv" && (mapping.delimiter !== detected.delimiter || mapping.hasHeader !== detected.hasHeader)) return null;
  const fits = (column: number | string) => (typeof column === "number" ? column < header.length : header.includes(column));
  return Object.values(mapping.columns).every(fits) ? mapping : null;
}
