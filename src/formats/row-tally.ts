import type { RejectedRow, RejectReason } from "@/domain/upload";

const MAX_SAMPLES = 20;

export interface RowCounts {
  /** Rows of data: accepted plus all rejected. */
  rowsRead: number;
  accepted: number;
  rejected: Partial<Record<RejectReason, number>>;
  samples: RejectedRow[];
}

/** Counts rows and holds the rejected ones until they are handed on. */
export class RowTally implements RowCounts {
  rowsRead = 0;
  accepted = 0;
  rejected: Partial<Record<RejectReason, number>> = {};
  samples: RejectedRow[] = [];
  private waiting: RejectedRow[] = [];

  accept(): void {
    this.rowsRead += 1;
    this.accepted += 1;
  }

  reject(line: number, reason: RejectReason, text: string): void {
    this.rowsRead += 1;
    this.rejected[reason] = (this.rejected[reason] ?? 0) + 1;
    const row = { line, reason, text };
    if (this.samples.length < MAX_SAMPLES) this.samples.push(row);
    this.waiting.push(row);
  }

  takeRejected(): RejectedRow[] {
    const rows = this.waiting;
    if (rows.length > 0) this.waiting = [];
    return rows;
  }

  counts(): RowCounts {
    return { rowsRead: this.rowsRead, accepted: this.accepted, rejected: this.rejected, samples: this.samples };
  }
}
