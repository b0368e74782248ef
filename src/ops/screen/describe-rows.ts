import { REJECT_SENTENCES, type RejectReason } from "@/domain/upload";
import type { RowCounts } from "@/formats/row-tally";

/** What became of the rows of a file, line by line. */
export function describeRows(path: string, counts: RowCounts): string[] {
  const rejected = counts.rowsRead - counts.accepted;
  const lines = [`${path}: ${counts.rowsRead} rows read, ${counts.accepted} accepted, ${rejected} rejected`];
  for (const [reason, count] of Object.entries(counts.rejected)) {
    lines.push(`  ${count} x ${reason}: ${REJECT_SENTENCES[reason as RejectReason]}`);
  }
  for (const sample of counts.samples) lines.push(`  line ${sample.line}, ${sample.reason}: ${JSON.stringify(sample.text)}`);
  const unseen = rejected - counts.samples.length;
  if (unseen > 0) lines.push(`  and ${unseen} more`);
  return lines;
}
