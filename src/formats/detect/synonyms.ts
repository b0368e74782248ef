import type { JUNCTION_FIELDS, LEG_FIELDS, PING_FIELDS, SpeedUnit, UploadKind } from "@/domain/upload";

/** Names under which columns arrive, in the order in which they are preferred; compared by `plainName`. */
const PING_SYNONYMS: Record<(typeof PING_FIELDS)[number], readonly string[]> = {
  vehicle_id: ["vehicle_id", "vehicle", "veh_id", "vid", "device_id", "device", "probe_id", "probe", "unit_id", "unit", "track_id", "object_id", "id"],
  timestamp: ["timestamp", "time_stamp", "time", "datetime", "date_time", "ts", "time_utc", "utc", "utc_time", "epoch", "gps_time", "recorded_at", "recorded", "observed_at", "t"],
  lat: ["lat", "latitude", "gps_lat", "lat_deg", "y"],
  lon: ["lon", "longitude", "lng", "long", "gps_lon", "lon_deg", "x"],
  speed: ["speed", "velocity", "spd", "gps_speed", "speed_over_ground", "v"],
  heading: ["heading", "bearing", "course", "direction", "azimuth", "course_over_ground", "head", "dir"],
  trip_id: ["trip_id", "trip", "journey_id", "journey"],
};

const JUNCTION_SYNONYMS: Record<(typeof JUNCTION_FIELDS)[number], readonly string[]> = {
  junction_id: ["junction_id", "junction", "junction_code", "code", "signal_id", "signal", "intersection_id", "site_id", "site", "node_id", "id", "no", "number"],
  name: ["name", "junction_name", "intersection", "intersection_name", "signal_name", "site_name", "description", "location", "title"],
  lat: PING_SYNONYMS.lat,
  lon: PING_SYNONYMS.lon,
  corridor: ["corridor", "corridor_name", "route", "arterial"],
  corridor_order: ["corridor_order", "order", "sequence", "position_on_corridor"],
  district: ["district", "area", "zone", "ward", "borough"],
  cycle_s: ["cycle_s", "cycle", "cycle_length", "cycle_length_s", "cycle_time"],
  last_retimed: ["last_retimed", "retimed", "last_timing", "retimed_on"],
  notes: ["notes", "note", "remarks", "comment", "comments"],
};

const LEG_SYNONYMS: Record<(typeof LEG_FIELDS)[number], readonly string[]> = {
  junction_id: JUNCTION_SYNONYMS.junction_id,
  name: ["name", "leg_name", "leg", "approach", "street", "description", "title"],
  speed_limit_kmh: ["speed_limit_kmh", "speed_limit", "limit", "maxspeed", "max_speed"],
  storage_m: ["storage_m", "storage", "storage_length", "storage_length_m"],
  lanes: ["lanes", "lane_count", "number_of_lanes"],
};

const SYNONYMS: Record<UploadKind, Record<string, readonly string[]>> = { pings: PING_SYNONYMS, junctions: JUNCTION_SYNONYMS, legs: LEG_SYNONYMS };

/** Units at the end of a name: `speed_kmh`, `Time (ms)`. */
const UNIT_ENDINGS = ["kmh", "kph", "km_h", "mph", "mi_h", "ms", "mps", "m_s", "kn", "kt", "kts", "knot", "knots", "deg", "degrees", "s", "sec", "seconds", "millis", "utc", "iso", "local"];

const SPEED_ENDINGS: Record<SpeedUnit, readonly string[]> = {
  kmh: ["kmh", "kph", "km_h"],
  mph: ["mph", "mi_h"],
  ms: ["ms", "mps", "m_s"],
  kn: ["kn", "kt", "kts", "knot", "knots"],
};

export function plainName(name: string): string {
  return name
    .replace(/([a-z])([A-Z])/g, "$1_$2")
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, "_")
    .replace(/^_+|_+$/g, "");
}

/** Field to column number. A column serves one field only; an exact name goes before a synonym. */
export function columnsFromHeader(header: readonly string[], kind: UploadKind): Record<string, number> {
  const names = header.map(plainName);
  const bare = names.map(withoutUnit);
  const columns: Record<string, number> = {};
  const taken = new Set<number>();
  const assign = (field: string, synonyms: readonly string[]) => {
    for (const synonym of synonyms) {
      const exact = names.findIndex((name, i) => name === synonym && !taken.has(i));
      const found = exact >= 0 ? exact : bare.findIndex((name, i) => name === synonym && !taken.has(i));
      if (found < 0 || columns[field] !== undefined) continue;
      columns[field] = found;
      taken.add(found);
    }
  };
  const fields = Object.entries(SYNONYMS[kind]);
  for (const [field] of fields) assign(field, [field]);
  for (const [field, synonyms] of fields) assign(field, synonyms);
  return columns;
}

export function speedUnitFromName(name: string): SpeedUnit | null {
  const plain = plainName(name);
  for (const [unit, endings] of Object.entries(SPEED_ENDINGS)) {
    if (endings.some((ending) => plain.endsWith(`_${ending}`))) return unit as SpeedUnit;
  }
  return null;
}

function withoutUnit(name: string): string {
  const ending = UNIT_ENDINGS.find((unit) => name.endsWith(`_${unit}`));
  return ending === undefined ? name : name.slice(0, -ending.length - 1);
}
