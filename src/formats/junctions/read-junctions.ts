import type { FileMapping, JunctionField, RejectedRow, RejectReason } from "@/domain/upload";
import { JUNCTION_FIELDS, neededFields } from "@/domain/upload";
import { CsvScanner, type CsvRow } from "../csv/csv-scanner";
import { fieldText, MAX_REJECT_TEXT, rowText } from "../csv/field";
import { byteOf, columnOf, propertyOf, requireFields } from "../fields";
import { FeatureScanner } from "../geojson/feature-scanner";
import { pointFeature, propertyText } from "../geojson/point-feature";
import { plainChunks } from "../gzip";
import { hasColumns } from "../pings/csv-pings";
import { RowTally, type RowCounts } from "../row-tally";
import { unusable } from "../unusable";
import { junctionFromTexts, type JunctionRow } from "./junction-row";

export type { JunctionRow } from "./junction-row";

export interface JunctionsRead extends RowCounts {
  junctions: JunctionRow[];
  rejectedRows: RejectedRow[];
  /** Values that were left out because they cannot be read; the junction itself was kept. */
  remarks: string[];
}

const MAX_JUNCTIONS = 100_000;
const MAX_REMARKS = 20;

type Texts = Record<JunctionField, string>;

/** Reads a file of junctions, CSV or GeoJSON points, gzipped or not. The first of several rows with one identifier counts. */
export async function readJunctions(chunks: AsyncIterable<Uint8Array>, mapping: FileMapping): Promise<JunctionsRead> {
  requireFields(mapping, neededFields("junctions", mapping.format));
  const list = new JunctionList(mapping);
  const scanner = mapping.format === "csv" ? csvScanner(mapping, list) : featureScanner(mapping, list);
  for await (const chunk of plainChunks(chunks)) scanner.push(chunk);
  scanner.finish();
  return list.result();
}

function csvScanner(mapping: FileMapping, list: JunctionList): CsvScanner {
  let expected = 0;
  let isHeader = mapping.hasHeader;
  return new CsvScanner(byteOf(mapping.delimiter), (row) => {
    if (expected === 0) expected = row.count;
    if (isHeader) {
      isHeader = false;
      return;
    }
    if (hasColumns(row, expected)) list.take(row.line, csvTexts(row, mapping), () => rowText(row));
    else list.reject(row.line, "columns", rowText(row));
  });
}

function csvTexts(row: CsvRow, mapping: FileMapping): Texts {
  return textsOf((field) => fieldText(row, columnOf(mapping, field)));
}

function featureScanner(mapping: FileMapping, list: JunctionList): FeatureScanner {
  return new FeatureScanner((text, line) => {
    const feature = pointFeature(text);
    if (feature === null) {
      list.reject(line, "columns", text.slice(0, MAX_REJECT_TEXT));
      return;
    }
    const texts = textsOf((field) => propertyText(feature.properties, propertyOf(mapping, field)));
    list.take(line, { ...texts, lat: String(feature.lat), lon: String(feature.lon) }, () => text.slice(0, MAX_REJECT_TEXT));
  });
}

function textsOf(read: (field: JunctionField) => string): Texts {
  return Object.fromEntries(JUNCTION_FIELDS.map((field) => [field, read(field)])) as Texts;
}

class JunctionList {
  private readonly tally = new RowTally();
  private readonly junctions = new Map<string, JunctionRow>();
  private readonly remarks: string[] = [];
  private readonly decimal: "." | ",";

  constructor(mapping: FileMapping) {
    this.decimal = mapping.format === "csv" ? mapping.decimal : ".";
  }

  take(line: number, texts: Texts, text: () => string): void {
    const { junction, reason, unread } = junctionFromTexts(texts, this.decimal);
    if (reason !== null) return this.reject(line, reason, text());
    if (this.junctions.has(junction.id)) return this.reject(line, "duplicate", text());
    if (this.junctions.size >= MAX_JUNCTIONS) throw unusable(`The file has more than ${MAX_JUNCTIONS} junctions.`);
    this.tally.accept();
    this.junctions.set(junction.id, junction);
    for (const field of unread) {
      if (this.remarks.length < MAX_REMARKS) this.remarks.push(`Line ${line}: ${field} "${texts[field]}" cannot be read and was left out.`);
    }
  }

  reject(line: number, reason: RejectReason, text: string): void {
    this.tally.reject(line, reason, text);
  }

  result(): JunctionsRead {
    return {
      ...this.tally.counts(),
      junctions: [...this.junctions.values()],
      rejectedRows: this.tally.takeRejected(),
      remarks: this.remarks,
    };
  }
}
