import { z } from "zod";

export const UPLOAD_KINDS = ["pings", "junctions", "legs"] as const;
export type UploadKind = (typeof UPLOAD_KINDS)[number];

/** Received files wait for a person to settle their mapping; waiting ones for a worker. */
export const UPLOAD_STATES = ["received", "waiting", "reading", "done", "failed"] as const;
export type UploadState = (typeof UPLOAD_STATES)[number];

export const DELIMITERS = [",", ";", "\t"] as const;
export const SPEED_UNITS = ["kmh", "mph", "ms", "kn"] as const;
export type SpeedUnit = (typeof SPEED_UNITS)[number];
/** Local ones carry no zone; with slashes, month (`mdy`) or day (`dmy`) comes first. */
export const TIME_FORMATS = ["iso", "epoch_s", "epoch_ms", "local", "local_mdy", "local_dmy"] as const;
export type TimeFormat = (typeof TIME_FORMATS)[number];

export function isLocalTime(format: TimeFormat): boolean {
  return format === "local" || format === "local_mdy" || format === "local_dmy";
}

export const PING_FIELDS = ["vehicle_id", "timestamp", "lat", "lon", "speed", "heading", "trip_id"] as const;
export const JUNCTION_FIELDS = [
  "junction_id",
  "name",
  "lat",
  "lon",
  "corridor",
  "corridor_order",
  "district",
  "cycle_s",
  "last_retimed",
  "notes",
] as const;
export const LEG_FIELDS = ["junction_id", "name", "speed_limit_kmh", "storage_m", "lanes"] as const;
export type PingField = (typeof PING_FIELDS)[number];
/** Fields without which a file cannot be read. */
export const PING_NEEDS = ["vehicle_id", "timestamp", "lat", "lon"] as const satisfies readonly PingField[];
export const JUNCTION_NEEDS = ["junction_id", "name", "lat", "lon"] as const satisfies readonly JunctionField[];
export const LEG_NEEDS = ["junction_id"] as const satisfies readonly LegField[];
export type JunctionField = (typeof JUNCTION_FIELDS)[number];
export type LegField = (typeof LEG_FIELDS)[number];

const FIELDS: Record<UploadKind, readonly string[]> = { pings: PING_FIELDS, junctions: JUNCTION_FIELDS, legs: LEG_FIELDS };
const NEEDS: Record<UploadKind, readonly string[]> = { pings: PING_NEEDS, junctions: JUNCTION_NEEDS, legs: LEG_NEEDS };

/** What a mapping may name: features of GeoJSON carry their own position. */
export function fieldsOf(kind: UploadKind, format: "csv" | "geojson"): readonly string[] {
  return withoutPosition(FIELDS[kind], format);
}

/** What it must name. */
export function neededFields(kind: UploadKind, format: "csv" | "geojson"): readonly string[] {
  return withoutPosition(NEEDS[kind], format);
}

function withoutPosition(fields: readonly string[], format: "csv" | "geojson"): readonly string[] {
  return format === "csv" ? fields : fields.filter((field) => field !== "lat" && field !== "lon");
}

/** How to read a file: what detection proposes, the person corrects, and a supplier's next file starts from. */
export const FileMapping = z.object({
  format: z.enum(["csv", "geojson"]),
  delimiter: z.enum(DELIMITERS),
  decimal: z.enum([".", ","]),
  hasHeader: z.boolean(),
  /** Field to column number from 0; for GeoJSON field to property name. */
  columns: z.record(z.string(), z.union([z.number().int().min(0).max(199), z.string().max(100)])),
  /** Names of the file's columns, as far as they go: by them a supplier's next file is read. */
  header: z.array(z.string().max(100)).max(200).optional(),
  timeFormat: z.enum(TIME_FORMATS),
  /** Zone of local times; ignored where the file says its own. */
  timeZone: z.string(),
  speedUnit: z.enum(SPEED_UNITS),
});
export type FileMapping = z.infer<typeof FileMapping>;

export const INGEST_STEPS = ["read", "learn legs", "match", "score", "store"] as const;
export type IngestStep = (typeof INGEST_STEPS)[number];

export interface IngestProgress {
  step: IngestStep;
  /** 0 to 1 over the whole ingest. */
  share: number;
  rowsRead: number;
}

export const REJECT_REASONS = ["columns", "vehicle", "time", "position", "speed", "heading", "duplicate", "name", "line", "far", "junction"] as const;
export type RejectReason = (typeof REJECT_REASONS)[number];

export const REJECT_SENTENCES: Record<RejectReason, string> = {
  columns: "The row has too few or too many columns, or a stray quotation mark.",
  vehicle: "The vehicle identifier is empty.",
  time: "The time cannot be read.",
  position: "Latitude or longitude is missing or out of range.",
  speed: "The speed cannot be read or is negative.",
  heading: "The heading cannot be read.",
  duplicate: "It stands in the file more than once.",
  name: "The identifier or the name is empty.",
  line: "The feature is no line of at least 30 m, or a coordinate is out of range.",
  far: "The line does not end at its junction. Lines are drawn towards the stop line.",
  junction: "No junction with this identifier is loaded.",
};

export interface RejectedRow {
  /** From 1, the header included. */
  line: number;
  reason: RejectReason;
  /** The row as it stands, cut at 200 characters. */
  text: string;
}

export interface IngestReport {
  rowsRead: number;
  accepted: number;
  rejected: Partial<Record<RejectReason, number>>;
  /** The first few, for the page; all of them are in the download. */
  samples: RejectedRow[];
  /** Sentences about values that were left out. */
  remarks?: string[];
  /** Of a pings file. */
  vehicles?: number;
  trips?: number;
  traversals?: number;
  /** Left out because an earlier upload brought them. */
  knownTraversals?: number;
  incompleteTraversals?: number;
  duplicatePings?: number;
  jumps?: number;
  junctionsCovered?: number;
  junctionsTotal?: number;
  legsFound?: number;
  firstAt?: string;
  lastAt?: string;
  medianIntervalS?: number;
  /** Share of the traffic that was seen, estimated from queues. */
  penetration?: number;
  hasSpeed?: boolean;
  hasHeading?: boolean;
  /** Of a junctions file. */
  created?: number;
  updated?: number;
  /** Of a file of leg lines. */
  legsDrawn?: number;
  legsReplaced?: number;
  junctionsTouched?: number;
}

/** What the first bytes of a file tell: a mapping to start from and rows to look at. */
export interface Detection {
  mapping: FileMapping;
  /** Names of the columns, or of the properties of the first feature. */
  header: string[];
  preview: string[][];
  gzip: boolean;
  /** Sentences about what could not be settled. */
  remarks: string[];
}

export interface UploadView {
  id: string;
  kind: UploadKind;
  fileName: string;
  bytes: number;
  state: UploadState;
  supplier: string | null;
  progress: IngestProgress | null;
  report: IngestReport | null;
  failure: string | null;
  hasRejects: boolean;
  by: string | null;
  createdAt: string;
  finishedAt: string | null;
}

export interface CoverageView {
  junctions: number;
  covered: number;
  /** Newest last. */
  days: { date: string; traversals: number; junctions: number; medianIntervalS: number | null }[];
  uncovered: { id: number; code: string; name: string }[];
}
