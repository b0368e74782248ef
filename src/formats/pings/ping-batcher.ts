import type { PingColumns } from "@/core/types";
import { emptyColumns } from "./ping-columns";

/** Collects pings into batches of a fixed number of rows, wherever the input was cut. */
export class PingBatcher {
  private ready: PingColumns[] = [];
  private batch: PingColumns;

  constructor(private readonly batchRows: number) {
    this.batch = emptyColumns(batchRows);
  }

  add(vehicle: number, tMs: number, lat: number, lon: number, speedMs: number, headingDeg: number): void {
    const batch = this.batch;
    const i = batch.length;
    batch.vehicle[i] = vehicle;
    batch.tMs[i] = tMs;
    batch.lat[i] = lat;
    batch.lon[i] = lon;
    batch.speedMs[i] = speedMs;
    batch.headingDeg[i] = headingDeg;
    batch.length = i + 1;
    if (batch.length === this.batchRows) {
      this.ready.push(batch);
      this.batch = emptyColumns(this.batchRows);
    }
  }

  takeReady(): PingColumns[] {
    const batches = this.ready;
    if (batches.length > 0) this.ready = [];
    return batches;
  }

  /** The last, shorter batch; null if there is none. */
  takeRest(): PingColumns | null {
    return this.batch.length > 0 ? this.batch : null;
  }
}
