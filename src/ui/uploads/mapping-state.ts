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

/** What is kept of a header: names beyond these do not tell columns apart. */
export function headerToKeep(mapping: FileMapping, header: readonly string[]): string[] | undefined {
  return mapping.format === "csv" && !mapping.hasHeader ? undefined : header.slice(0, 200).map((name) => name.slice(0, 100));
}

/** A supplier's mapping if it fits the file at hand: same format and shape, and its columns among the file's, by name where they have names. */
export function remembered(mapping: FileMapping | null, detected: FileMapping, header: readonly string[]): FileMapping | null {
  if (mapping === null || mapping.format !== detected.format) return null;
  if (mapping.format === "csv" && (mapping.delimiter !== detected.delimiter || mapping.hasHeader !== detected.hasHeader)) return null;
  if (mapping.header && headerToKeep(mapping, header)) return byName(mapping, mapping.header, detected, header);
  const fits = (column: number | string) => (typeof column === "number" ? column < header.length : header.includes(column));
  return Object.values(mapping.columns).every(fits) ? mapping : null;
}

/** The earlier file's columns wherever they stand now, and those that it did not have as they were found. */
function byName(before: FileMapping, namesBefore: readonly string[], found: FileMapping, header: readonly string[]): FileMapping | null {
  const names = header.map((name) => name.slice(0, 100));
  const columns: FileMapping["columns"] = {};
  for (const [field, column] of Object.entries(before.columns)) {
    const at = names.indexOf(typeof column === "number" ? namesBefore[column] : column);
    if (at < 0) return null;
    columns[field] = columnKey(before, header, at);
  }
  const used = new Set(Object.values(columns));
  for (const [field, column] of Object.entries(found.columns)) {
    const isNew = !namesBefore.includes(typeof column === "number" ? names[column] : column);
    if (isNew && columns[field] === undefined && !used.has(column)) columns[field] = column;
  }
  const hadSpeed = before.columns.speed !== undefined;
  return { ...before, columns, header: undefined, speedUnit: hadSpeed ? before.speedUnit : found.speedUnit };
}
