import { eastM, northM, planeAt } from "@/core/geometry/plane";
import { lengthOf } from "@/core/geometry/polyline";
import { SHORTEST_LEG_M } from "@/core/legs/reshape";
import { neededFields, type FileMapping, type LegField, type RejectedRow, type RejectReason } from "@/domain/upload";
import { MAX_REJECT_TEXT } from "../csv/field";
import { isPosition, propertyOf, requireFields } from "../fields";
import { FeatureScanner } from "../geojson/feature-scanner";
import { lineFeature, type LineFeature } from "../geojson/line-feature";
import { propertyText } from "../geojson/point-feature";
import { plainChunks } from "../gzip";
import { RowTally, type RowCounts } from "../row-tally";
import { unusable } from "../unusable";

/** A leg line that the city drew, towards the stop line. */
export interface DrawnLeg {
  junctionId: string;
  name: string | null;
  lat: Float64Array;
  lon: Float64Array;
  speedLimitKmh: number | null;
  storageM: number | null;
  lanes: number | null;
}

export interface LegsRead extends RowCounts {
  legs: DrawnLeg[];
  rejectedRows: RejectedRow[];
  /** Values that were left out because they cannot be read; the leg itself was kept. */
  remarks: string[];
}

export interface KnownJunctions {
  /** Undefined where no such junction is loaded. */
  get(junctionId: string): { lat: number; lon: number } | undefined;
}

const MAX_BYTES = 50 * 2 ** 20;
const MAX_NAME_CHARS = 80;
const MAX_REMARKS = 20;
/** A stop line lies this near its junction's point, m. */
const MAX_END_M = 150;

/** Numbers that a leg may carry: what is beyond is left out with a remark. */
const BOUNDS = {
  speed_limit_kmh: { from: 5, to: 150, isWhole: false },
  storage_m: { from: 5, to: 5000, isWhole: false },
  lanes: { from: 1, to: 12, isWhole: true },
} as const satisfies Partial<Record<LegField, { from: number; to: number; isWhole: boolean }>>;

/** Reads drawn leg lines: GeoJSON, gzipped or not, at most 50 MB unpacked. Lines of unknown junctions are rejected. */
export async function readLegs(chunks: AsyncIterable<Uint8Array>, mapping: FileMapping, junctions: KnownJunctions): Promise<LegsRead> {
  if (mapping.format !== "geojson") throw unusable("Leg lines come as GeoJSON with one LineString for each leg.");
  requireFields(mapping, neededFields("legs", "geojson"));
  const list = new LegList(mapping, junctions);
  const scanner = new FeatureScanner((text, line) => list.take(text, line));
  let bytes = 0;
  for await (const chunk of plainChunks(chunks)) {
    bytes += chunk.length;
    if (bytes > MAX_BYTES) throw unusable("The file is larger than 50 MB. A city's leg lines take far less: leave out what is not a leg, or send them in parts.");
    scanner.push(chunk);
  }
  scanner.finish();
  return list.result();
}

class LegList {
  private readonly tally = new RowTally();
  private readonly legs: DrawnLeg[] = [];
  private readonly remarks: string[] = [];
  private readonly seen = new Set<string>();

  constructor(
    private readonly mapping: FileMapping,
    private readonly junctions: KnownJunctions,
  ) {}

  take(text: string, line: number): void {
    const reject = (reason: RejectReason) => this.tally.reject(line, reason, text.slice(0, MAX_REJECT_TEXT));
    const feature = lineFeature(text);
    if (feature === null) return reject("columns");
    const junctionId = this.textOf(feature, "junction_id");
    if (junctionId === "") return reject("name");
    const { lat, lon } = feature;
    if (lat === null || lon === null || !lat.every((value, i) => isPosition(value, lon[i]))) return reject("line");
    const junction = this.junctions.get(junctionId);
    if (!junction) return reject("junction");
    const drawn = inPlane(junction, lat, lon);
    if (lengthOf(drawn) < SHORTEST_LEG_M) return reject("line");
    if (!endsAtOrigin(drawn)) return reject("far");
    const key = `${junctionId} ${lat.join()} ${lon.join()}`;
    if (this.seen.has(key)) return reject("duplicate");
    this.seen.add(key);
    this.tally.accept();
    this.legs.push({
      junctionId,
      lat,
      lon,
      name: this.textOf(feature, "name").slice(0, MAX_NAME_CHARS) || null,
      speedLimitKmh: this.numberOf(feature, "speed_limit_kmh", line),
      storageM: this.numberOf(feature, "storage_m", line),
      lanes: this.numberOf(feature, "lanes", line),
    });
  }

  result(): LegsRead {
    return { ...this.tally.counts(), legs: this.legs, rejectedRows: this.tally.takeRejected(), remarks: this.remarks };
  }

  private textOf(feature: LineFeature, field: LegField): string {
    return propertyText(feature.properties, propertyOf(this.mapping, field));
  }

  private numberOf(feature: LineFeature, field: keyof typeof BOUNDS, line: number): number | null {
    const text = this.textOf(feature, field);
    if (text === "") return null;
    const { from, to, isWhole } = BOUNDS[field];
    const value = /^\d+([.,]\d+)?$/.test(text) ? Number(text.replace(",", ".")) : NaN;
    if (value >= from && value <= to && (!isWhole || Number.isInteger(value))) return value;
    if (this.remarks.length < MAX_REMARKS) this.remarks.push(`Line ${line}: ${field} "${text}" is no number from ${from} to ${to} and was left out.`);
    return null;
  }
}

function inPlane(junction: { lat: number; lon: number }, lat: Float64Array, lon: Float64Array): Float64Array {
  const plane = planeAt(junction.lat, junction.lon);
  return Float64Array.from([...lat].flatMap((value, i) => [eastM(plane, lon[i]), northM(plane, value)]));
}

/** The stop line is the end at the junction. */
function endsAtOrigin(line: Float64Array): boolean {
  const end = Math.hypot(line[line.length - 2], line[line.length - 1]);
  return end <= MAX_END_M && end < Math.hypot(line[0], line[1]);
}
