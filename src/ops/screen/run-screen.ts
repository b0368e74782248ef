import { createWriteStream } from "node:fs";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { processCity } from "@/core/process";
import { legQuarters } from "@/core/queues/leg-quarters";
import { screenRows } from "@/core/scores/screen-rows";
import type { PingColumns } from "@/core/types";
import { AppError } from "@/domain/errors";
import type { JunctionRow } from "@/formats/junctions/junction-row";
import { csvText } from "@/formats/csv/write-csv";
import { readJunctions } from "@/formats/junctions/read-junctions";
import { isLocalTime } from "@/domain/upload";
import { appendColumns, emptyColumns } from "@/formats/pings/ping-columns";
import { readPings } from "@/formats/pings/read-pings";
import { VehicleNames } from "@/formats/vehicle-names";
import { createH3Index } from "@/geo/h3-index";
import { describeRows } from "./describe-rows";
import { openFile, requireWritable, withFile } from "./open-file";
import type { ScreenArguments } from "./screen-arguments";
import { SCREEN_HEADER, screenCells } from "./screen-csv";

type Say = (line: string) => void;

/** From files to a file, through the same core as the application. Throws AppError for what the caller got wrong. */
export async function runScreen(args: ScreenArguments, say: Say): Promise<void> {
  const begun = performance.now();
  const clock = () => `${((performance.now() - begun) / 1000).toFixed(1)} s`;
  await requireWritable(args.out);
  const junctions = await loadJunctions(args, say);
  const pings = await loadPings(args, say);
  say(`${clock()}: ${pings.length} pings and ${junctions.length} junctions read`);
  const { network, traversals, openTracks, clean } = processCity(pings, junctions, createH3Index(), { driveSide: args.driveSide });
  say(`${clock()}: ${clean.trips} trips, ${clean.duplicates} duplicate pings and ${clean.jumps} impossible jumps dropped`);
  say(`${clock()}: ${network.legs.length} legs, ${traversals.length} traversals, ${clean.incompleteTraversals} incomplete ones not scored`);
  const rows = screenRows(network, traversals, legQuarters(network, traversals, openTracks));
  const cells = function* () {
    for (const row of rows) yield screenCells(row, network);
  };
  await withFile(args.out, () => pipeline(Readable.from(csvText(SCREEN_HEADER, cells())), createWriteStream(args.out)));
  say(`${clock()}: ${rows.length} rows written to ${args.out}`);
}

async function loadJunctions({ junctions: path }: ScreenArguments, say: Say): Promise<JunctionRow[]> {
  const read = await withFile(path, async () => {
    const { chunks, mapping, remarks } = await openFile(path, "junctions");
    remarks.forEach((remark) => say(`${path}: ${remark}`));
    return readJunctions(chunks, mapping);
  });
  describeRows(path, read).forEach(say);
  read.remarks.forEach((remark) => say(`  ${remark}`));
  if (read.junctions.length === 0) throw new AppError("invalid", `${path} holds no junction that can be used.`);
  return read.junctions;
}

async function loadPings({ pings: paths, timeZone }: ScreenArguments, say: Say): Promise<PingColumns> {
  let pings = emptyColumns(1 << 16);
  const vehicles = new VehicleNames();
  for (const path of paths) {
    const counts = await withFile(path, async () => {
      const { chunks, mapping, remarks } = await openFile(path, "pings");
      if (isLocalTime(mapping.timeFormat) && timeZone === null) {
        throw new AppError("invalid", "the times carry no zone. Say which is meant with --timezone.");
      }
      remarks.forEach((remark) => say(`${path}: ${remark}`));
      return readPings(chunks, { ...mapping, timeZone: timeZone ?? "UTC" }, { onBatch: (batch) => void (pings = appendColumns(pings, batch)) }, vehicles);
    });
    describeRows(path, counts).forEach(say);
  }
  if (pings.length === 0) throw new AppError("invalid", "No row of the pings could be used.");
  return pings;
}
