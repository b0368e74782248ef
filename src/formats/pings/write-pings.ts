import { stringify } from "csv-stringify/sync";
import type { PingColumns } from "@/core/types";
import type { FileMapping } from "@/domain/upload";
import type { VehicleNames } from "../vehicle-names";

/** How the rows below are read again. */
export const WRITTEN_PINGS: FileMapping = {
  format: "csv",
  delimiter: ",",
  decimal: ".",
  hasHeader: false,
  columns: { vehicle_id: 0, timestamp: 1, lat: 2, lon: 3, speed: 4, heading: 5 },
  timeFormat: "epoch_ms",
  timeZone: "UTC",
  speedUnit: "ms",
};

const figure = (value: number, digits: number) => (Number.isNaN(value) ? "" : value.toFixed(digits));

/** Rows of CSV without a header: degrees to a centimetre, m/s and degrees of heading to a hundredth. */
export function pingRows(batch: PingColumns, names: VehicleNames): string {
  const rows = Array.from({ length: batch.length }, (_, i) => [
    names.nameOf(batch.vehicle[i]),
    String(batch.tMs[i]),
    figure(batch.lat[i], 7),
    figure(batch.lon[i], 7),
    figure(batch.speedMs[i], 2),
    figure(batch.headingDeg[i], 2),
  ]);
  return stringify(rows);
}
