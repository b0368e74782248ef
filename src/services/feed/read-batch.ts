import type { PingColumns } from "@/core/types";
import { AppError } from "@/domain/errors";
import { isLocalTime } from "@/domain/upload";
import { MAX_BATCH_BYTES } from "@/domain/feed";
import { detect, DETECT_BYTES } from "@/formats/detect/detect";
import { plainChunks } from "@/formats/gzip";
import { readNdjsonPings } from "@/formats/pings/ndjson-pings";
import { readPings } from "@/formats/pings/read-pings";
import type { RowCounts } from "@/formats/row-tally";
import type { VehicleNames } from "@/formats/vehicle-names";

const OPENING_BRACE = 123;
const OPENING_BRACKET = 91;

/** The whole batch, unpacked. Throws a sentence for one that is empty, too large or damaged. */
export async function unpackBatch(content: AsyncIterable<Uint8Array>): Promise<Buffer> {
  const parts: Uint8Array[] = [];
  let bytes = 0;
  for await (const chunk of plainChunks(content)) {
    bytes += chunk.length;
    if (bytes > MAX_BATCH_BYTES) throw new AppError("invalid", `The batch is larger than ${MAX_BATCH_BYTES / 1e6} MB unpacked. Send it in parts.`);
    parts.push(chunk);
  }
  if (bytes === 0) throw new AppError("invalid", "The batch is empty.");
  return Buffer.concat(parts);
}

export interface ReadBatch {
  counts: RowCounts;
  batches: PingColumns[];
}

/** One JSON object a line, or CSV with a header row; which of them it is shows in the first character. */
export async function readBatch(bytes: Buffer, names: VehicleNames): Promise<ReadBatch> {
  const start = bytes.findIndex((byte) => byte > 32);
  if (bytes[start] === OPENING_BRACKET) throw new AppError("invalid", "This is a JSON array. Send one JSON object on each line, without brackets around them or commas between them.");
  return bytes[start] === OPENING_BRACE ? readNdjsonPings(bytes, names) : readCsv(bytes, names);
}

async function readCsv(bytes: Buffer, names: VehicleNames): Promise<ReadBatch> {
  const { mapping } = detect(bytes.subarray(0, DETECT_BYTES), "The batch", "pings");
  if (!mapping.hasHeader) throw new AppError("invalid", "A batch of CSV begins with a header row, as vehicle_id,timestamp,lat,lon,speed_kmh,heading.");
  // Nobody is there to choose a zone.
  if (isLocalTime(mapping.timeFormat)) throw new AppError("invalid", "The times carry no zone. Send them as ISO 8601 with a zone or as milliseconds since 1970.");
  const batches: PingColumns[] = [];
  const counts = await readPings(once(bytes), mapping, { onBatch: (batch) => void batches.push(batch) }, names);
  return { counts, batches };
}

async function* once(bytes: Uint8Array): AsyncGenerator<Uint8Array> {
  yield bytes;
}
