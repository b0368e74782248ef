import type { PingColumns } from "@/core/types";
import { neededFields, type FileMapping, type RejectedRow } from "@/domain/upload";
import { requireFields } from "../fields";
import { plainChunks } from "../gzip";
import { RowTally, type RowCounts } from "../row-tally";
import { unusable } from "../unusable";
import type { VehicleNames } from "../vehicle-names";
import { csvPings } from "./csv-pings";
import { geojsonPings } from "./geojson-pings";
import { PingBatcher } from "./ping-batcher";

export interface PingSink {
  /** A batch belongs to the sink: it is never written again. */
  onBatch(batch: PingColumns): void | Promise<void>;
  /** Every rejected row, in the order of the file. */
  onReject?(row: RejectedRow): void | Promise<void>;
  /** Once, at the end: lines of the file. */
  onEnd?(lines: number): void;
}

export interface PingReadOptions {
  batchRows: number;
  maxRows: number;
}

export const PING_READ_DEFAULTS: Readonly<PingReadOptions> = { batchRows: 65_536, maxRows: 500_000_000 };

/** Longer chunks are read in pieces, so that the sink can keep up. */
const PIECE_BYTES = 262_144;

/**
 * Reads a file of pings, CSV or GeoJSON, gzipped or not: chunks in, batches of columns out, in the order of the file.
 * Memory is bounded by a batch, a row and the names of the vehicles. Bad rows are counted and handed to the sink;
 * only a file that cannot be read at all throws.
 */
export async function readPings(
  chunks: AsyncIterable<Uint8Array>,
  mapping: FileMapping,
  sink: PingSink,
  vehicles: VehicleNames,
  options: Partial<PingReadOptions> = {},
): Promise<RowCounts> {
  const { batchRows, maxRows } = { ...PING_READ_DEFAULTS, ...options };
  requireFields(mapping, neededFields("pings", mapping.format));
  const tally = new RowTally();
  const batcher = new PingBatcher(batchRows);
  const open = mapping.format === "csv" ? csvPings : geojsonPings;
  const scanner = open(mapping, vehicles, batcher, tally);

  for await (const chunk of plainChunks(chunks)) {
    for (let from = 0; from < chunk.length; from += PIECE_BYTES) {
      scanner.push(chunk.subarray(from, from + PIECE_BYTES));
      await drain(batcher, tally, sink);
      if (tally.rowsRead > maxRows) throw unusable(`The file has more than ${maxRows} rows. Send it in parts.`);
    }
  }
  scanner.finish();
  await drain(batcher, tally, sink);
  const rest = batcher.takeRest();
  if (rest !== null) await sink.onBatch(rest);
  sink.onEnd?.(scanner.lines);
  return tally.counts();
}

async function drain(batcher: PingBatcher, tally: RowTally, sink: PingSink): Promise<void> {
  for (const batch of batcher.takeReady()) await sink.onBatch(batch);
  for (const row of tally.takeRejected()) await sink.onReject?.(row);
}
