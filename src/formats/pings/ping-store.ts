import type { PingColumns } from "@/core/types";
import { emptyColumns } from "./ping-columns";

/** Gathers batches into one set of columns; grows by half, so that at most a third of it stands empty. */
export class PingStore {
  private columns: PingColumns = emptyColumns(1 << 16);

  add(batch: PingColumns): void {
    const { columns } = this;
    const from = columns.length;
    const to = from + batch.length;
    if (to > columns.vehicle.length) this.grow(Math.max(to, Math.ceil(columns.vehicle.length * 1.5)));
    copy(batch, batch.length, this.columns, from);
    this.columns.length = to;
  }

  /** The columns as they stand; arrays may be longer than `length`. */
  all(): PingColumns {
    return this.columns;
  }

  private grow(rows: number): void {
    const larger = emptyColumns(rows);
    copy(this.columns, this.columns.length, larger, 0);
    larger.length = this.columns.length;
    this.columns = larger;
  }
}

function copy(from: PingColumns, rows: number, to: PingColumns, at: number): void {
  to.vehicle.set(from.vehicle.subarray(0, rows), at);
  to.tMs.set(from.tMs.subarray(0, rows), at);
  to.lat.set(from.lat.subarray(0, rows), at);
  to.lon.set(from.lon.subarray(0, rows), at);
  to.speedMs.set(from.speedMs.subarray(0, rows), at);
  to.headingDeg.set(from.headingDeg.subarray(0, rows), at);
}
