import { isLocalTime, neededFields, type Detection, type FileMapping, type SpeedUnit, type UploadKind } from "@/domain/upload";
import { isGzip, plainStart } from "../gzip";
import { timeParser } from "../time/parse-time";
import { csvShape, type SettledShape } from "./detect-csv";
import { geojsonShape } from "./detect-geojson";
import { hasDecimalComma, slashedOrder, speedUnitOf, timeFormatOf, type SpeedSample } from "./detect-values";
import { unusable } from "../unusable";
import { refuseBinary } from "./refuse-binary";
import { speedUnitFromName } from "./synonyms";

/** How much of a file `detect` looks at; give it at least this much where the file has it. */
export const DETECT_BYTES = 262_144;
const PREVIEW_ROWS = 8;
const MAX_CELL_CHARS = 80;
const encoder = new TextEncoder();

/** Latitude and longitude as text, whether they come from columns or from a geometry. */
interface Sample {
  header: string[];
  rows: string[][];
  column(field: string): string[];
  lat: string[];
  lon: string[];
}

/**
 * What the first bytes of a file tell: delimiter, header, columns, decimal mark, time format, unit of speed, with
 * remarks about what could not be settled. Throws a sentence where the file is no CSV and no GeoJSON.
 * What the person has `settled` is taken as given.
 */
export function detect(firstBytes: Uint8Array, fileName: string, kind: UploadKind, settled: SettledShape = {}): Detection {
  if (firstBytes.length === 0) throw refuseEmpty(fileName);
  const { bytes, isWhole } = plainStart(firstBytes, DETECT_BYTES);
  if (bytes.length === 0) throw refuseEmpty(fileName);
  const undecoded = refuseBinary(bytes);
  const isGeojson = firstVisible(bytes) === 123;
  if (kind === "legs" && !isGeojson) throw unusable(`${fileName} is no GeoJSON. Leg lines come as GeoJSON with one LineString for each leg.`);
  const remarks: string[] = [];
  // One may be a letter that was cut in two at the end.
  if (undecoded > 1) remarks.push("Some letters are not UTF-8 and will look wrong: save the file as UTF-8.");
  const { mapping, sample } = isGeojson ? fromGeojson(bytes, kind, isWhole) : fromCsv(bytes, kind, isWhole, settled, remarks);
  const missing = neededFields(kind, mapping.format).filter((field) => mapping.columns[field] === undefined);
  if (missing.length > 0) remarks.push(`No column was recognised for ${missing.join(", ")}: choose it.`);
  if (kind === "pings") settlePings(mapping, sample, remarks);
  return {
    mapping,
    header: sample.header,
    preview: sample.rows.slice(0, PREVIEW_ROWS).map((row) => row.map((cell) => cell.slice(0, MAX_CELL_CHARS))),
    gzip: isGzip(firstBytes),
    remarks,
  };
}

function fromCsv(bytes: Uint8Array, kind: UploadKind, isWhole: boolean, settled: SettledShape, remarks: string[]) {
  const shape = csvShape(bytes, kind, isWhole, settled);
  if (!shape.hasHeader) remarks.push("The file has no header row: check which column is which.");
  if (shape.rows.length === 0) remarks.push("The file has a header row but no rows of data.");
  const column = (field: string) => (shape.columns[field] === undefined ? [] : shape.rows.map((row) => row[shape.columns[field]] ?? ""));
  const sample: Sample = { header: shape.header, rows: shape.rows, column, lat: column("lat"), lon: column("lon") };
  if (kind === "pings" && shape.columns.vehicle_id === undefined && shape.columns.trip_id !== undefined) {
    shape.columns.vehicle_id = shape.columns.trip_id;
    delete shape.columns.trip_id;
    remarks.push("The file names trips but no vehicles: each trip is taken for a vehicle of its own.");
  }
  const decimal = hasDecimalComma(sample.lat) || hasDecimalComma(sample.lon) ? "," : ".";
  const mapping: FileMapping = { ...blankMapping("csv"), delimiter: shape.delimiter, decimal, hasHeader: shape.hasHeader, columns: shape.columns };
  return { mapping, sample };
}

function fromGeojson(bytes: Uint8Array, kind: UploadKind, isWhole: boolean) {
  const shape = geojsonShape(bytes, kind, isWhole);
  const column = (field: string) => {
    const at = shape.header.indexOf(shape.columns[field]);
    return at < 0 ? [] : shape.rows.map((row) => row[at]);
  };
  const lat = shape.features.map((feature) => String(feature.lat));
  const lon = shape.features.map((feature) => String(feature.lon));
  const sample: Sample = { header: shape.header, rows: shape.rows, column, lat, lon };
  const mapping: FileMapping = { ...blankMapping("geojson"), columns: shape.columns };
  return { mapping, sample };
}

function blankMapping(format: FileMapping["format"]): FileMapping {
  return { format, delimiter: ",", decimal: ".", hasHeader: true, columns: {}, timeFormat: "iso", timeZone: "UTC", speedUnit: "kmh" };
}

function settlePings(mapping: FileMapping, sample: Sample, remarks: string[]): void {
  const times = sample.column("timestamp");
  const format = timeFormatOf(times);
  if (format !== null) mapping.timeFormat = format;
  else if (times.length > 0) remarks.push("The times are in no format that is known: see the first rows.");
  if (format !== null && isLocalTime(format)) remarks.push("The times carry no zone: they are read in the zone that is chosen.");
  if (format === "local_mdy" && slashedOrder(times) === null) {
    remarks.push("The dates do not tell whether month or day comes first: month first is assumed. Choose day first if it is so.");
  }
  const speed = mapping.columns.speed;
  if (speed === undefined) return;
  const named = speedUnitFromName(typeof speed === "number" && mapping.hasHeader ? sample.header[speed] : String(speed));
  const driven = named === null ? speedUnitOf(speedSamples(mapping, sample)) : null;
  mapping.speedUnit = named ?? driven ?? "kmh";
  if (named === null) remarks.push(unitRemark(driven));
}

const UNIT_NAMES: Record<SpeedUnit, string> = { kmh: "km/h", mph: "mph", ms: "m/s", kn: "knots" };

function unitRemark(driven: SpeedUnit | null): string {
  if (driven === null) return "The file does not say the unit of speed: km/h is assumed.";
  return `The file does not say the unit of speed: the way the vehicles went suggests ${UNIT_NAMES[driven]}.`;
}

function speedSamples(mapping: FileMapping, sample: Sample): SpeedSample[] {
  const vehicles = sample.column("vehicle_id");
  const speeds = sample.column("speed");
  const toNumber = (text: string | undefined) => Number.parseFloat((text ?? "").replace(",", "."));
  const parseTime = timeParser(mapping.timeFormat, "UTC", mapping.decimal.charCodeAt(0));
  return sample.column("timestamp").map((time, i) => {
    const text = encoder.encode(time);
    return { vehicle: vehicles[i] ?? "", tS: parseTime(text, 0, text.length) / 1000, lat: toNumber(sample.lat[i]), lon: toNumber(sample.lon[i]), speed: toNumber(speeds[i]) };
  });
}

function firstVisible(bytes: Uint8Array): number {
  let at = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
  while (at < bytes.length && bytes[at] <= 32) at += 1;
  return bytes[at] ?? 0;
}

function refuseEmpty(fileName: string) {
  return unusable(`The file ${fileName} is empty.`);
}
