import type { PingColumns } from "@/core/types";
import type { FileMapping, RejectReason, TimeFormat } from "@/domain/upload";
import { MAX_REJECT_TEXT } from "../csv/field";
import { parsedObject, propertyText } from "../geojson/point-feature";
import { RowTally, type RowCounts } from "../row-tally";
import type { VehicleNames } from "../vehicle-names";
import { PingBatcher } from "./ping-batcher";
import { FIELD, PingJudge } from "./ping-judge";
import { ValueLine } from "./value-line";

const NEWLINE = 10;
const decoder = new TextDecoder("utf-8");
const MAPPING: FileMapping = { format: "geojson", delimiter: ",", decimal: ".", hasHeader: false, columns: {}, timeFormat: "iso", timeZone: "UTC", speedUnit: "kmh" };

interface Reader {
  judge: PingJudge;
  line: ValueLine;
}

function openReader(timeFormat: TimeFormat): Reader {
  const judge = new PingJudge({ ...MAPPING, timeFormat });
  return { judge, line: new ValueLine(judge.spans) };
}

/**
 * Reads a batch of pings, one JSON object a line with `vehicle_id`, `timestamp`, `lat`, `lon` and, where known,
 * `speed_kmh` and `heading`. Values are judged as if they stood in a file; a number as timestamp is ms since 1970.
 * Empty lines are no rows. O(bytes).
 */
export function readNdjsonPings(bytes: Uint8Array, names: VehicleNames, batchRows = 65_536): { counts: RowCounts; batches: PingColumns[] } {
  const tally = new RowTally();
  const batcher = new PingBatcher(batchRows);
  const readers = { iso: openReader("iso"), epoch: openReader("epoch_ms") };

  const judged = (text: string): RejectReason | Reader => {
    const values = parsedObject(text);
    if (values === null) return "columns";
    const reader = typeof values.timestamp === "number" ? readers.epoch : readers.iso;
    const { line, judge } = reader;
    line.clear();
    line.put(FIELD.vehicle, propertyText(values, "vehicle_id"));
    line.put(FIELD.time, propertyText(values, "timestamp"));
    line.put(FIELD.lat, propertyText(values, "lat"));
    line.put(FIELD.lon, propertyText(values, "lon"));
    line.put(FIELD.speed, propertyText(values, "speed_kmh"));
    line.put(FIELD.heading, propertyText(values, "heading"));
    return judge.judge(line.bytes) ?? reader;
  };

  let lineNumber = 0;
  for (let from = 0; from < bytes.length; ) {
    const found = bytes.indexOf(NEWLINE, from);
    const end = found < 0 ? bytes.length : found;
    const text = decoder.decode(bytes.subarray(from, end)).trim();
    from = end + 1;
    lineNumber += 1;
    if (text === "") continue;
    const outcome = judged(text);
    if (typeof outcome === "string") {
      tally.reject(lineNumber, outcome, text.slice(0, MAX_REJECT_TEXT));
      continue;
    }
    tally.accept();
    const { line, judge } = outcome;
    const vehicle = names.intern(line.bytes, judge.spans[0], judge.spans[1]);
    batcher.add(vehicle, judge.tMs, judge.lat, judge.lon, judge.speedMs, judge.headingDeg);
  }
  const rest = batcher.takeRest();
  return { counts: tally.counts(), batches: [...batcher.takeReady(), ...(rest ? [rest] : [])] };
}
