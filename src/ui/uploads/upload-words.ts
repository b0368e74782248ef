import type { IngestStep, UploadKind, UploadState, UploadView } from "@/domain/upload";
import { formatNumber } from "@/ui/format";
import { rejectedCount } from "./report-words";

export const KIND_NAMES: Record<UploadKind, string> = { pings: "pings", junctions: "junctions", legs: "leg lines" };

export const STATE_NAMES: Record<UploadState, string> = {
  received: "columns to confirm",
  waiting: "waiting",
  reading: "reading",
  done: "in",
  failed: "failed",
};

export const STEP_WORDS: Record<IngestStep, string> = {
  read: "reading the rows",
  "learn legs": "finding legs",
  match: "matching trips to legs",
  score: "measuring delay and queues",
  store: "storing the result",
};

/** One line on what has become of a file. */
export function outcomeWords(upload: UploadView, locale: string): string {
  const { state, report, failure, progress } = upload;
  switch (state) {
    case "received":
      return "Nothing was read yet: its columns are to be confirmed.";
    case "waiting":
      return "Waits for its turn.";
    case "reading":
      return progress ? `${capital(STEP_WORDS[progress.step])}, ${formatNumber(progress.rowsRead, locale)} rows so far.` : "Begins.";
    case "failed":
      return failure ?? "It could not be read.";
    case "done":
      return report ? doneWords(upload, locale) : "";
    default:
      return state satisfies never;
  }
}

function doneWords({ kind, report }: UploadView, locale: string): string {
  if (!report) return "";
  const rejected = rejectedCount(report);
  const rows = `${formatNumber(report.accepted, locale)} rows accepted, ${formatNumber(rejected, locale)} rejected`;
  if (kind === "junctions") return `${rows}; ${formatNumber(report.created ?? 0, locale)} junctions new.`;
  if (kind === "legs") return `${rows}; ${formatNumber(report.legsDrawn ?? 0, locale)} legs drawn.`;
  return `${rows}; ${formatNumber(report.traversals ?? 0, locale)} traversals.`;
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
