import type { IngestReport, UploadKind } from "@/domain/upload";
import { counted, formatInstant, formatNumber, formatShare } from "@/ui/format";

export function rejectedCount(report: IngestReport): number {
  return Object.values(report.rejected).reduce((sum, count) => sum + count, 0);
}

/** The report in plain words, a sentence for each thing worth knowing. */
export function reportWords(report: IngestReport, kind: UploadKind, locale: string, timeZone: string): string[] {
  const figure = (value: number) => formatNumber(value, locale);
  const rejected = rejectedCount(report);
  const rows = `${counted(report.rowsRead, "row was", "rows were", locale)} read: ${figure(report.accepted)} accepted, ${rejected === 0 ? "none" : figure(rejected)} rejected.`;
  switch (kind) {
    case "junctions":
      return [rows, ...junctionWords(report, locale)];
    case "legs":
      return [rows, ...legWords(report, locale)];
    case "pings":
      return [rows, ...pingWords(report, locale, timeZone)];
    default:
      return kind satisfies never;
  }
}

function legWords({ legsDrawn, legsReplaced, junctionsTouched }: IngestReport, locale: string): string[] {
  if (legsDrawn === undefined) return [];
  const at = counted(junctionsTouched ?? 0, "junction", "junctions", locale);
  const drawn = `${counted(legsDrawn, "leg", "legs", locale)} at ${at} ${legsDrawn === 1 ? "is" : "are"} drawn now; ${legsReplaced ? counted(legsReplaced, "earlier one was", "earlier ones were", locale) : "none was"} replaced.`;
  return [drawn, "At these junctions no leg is found in pings any more. Pings that were read in before are matched to the drawn legs anew."];
}

function junctionWords({ created, updated }: IngestReport, locale: string): string[] {
  if (created === undefined && updated === undefined) return [];
  return [`${counted(created ?? 0, "junction is", "junctions are", locale)} new, ${counted(updated ?? 0, "was", "were", locale)} known before and brought up to date.`];
}

function pingWords(report: IngestReport, locale: string, timeZone: string): string[] {
  const words: string[] = [];
  const { vehicles, trips, firstAt, lastAt, traversals, junctionsCovered, junctionsTotal, incompleteTraversals, legsFound } = report;
  if (vehicles !== undefined && firstAt && lastAt) {
    const span = `from ${formatInstant(firstAt, locale, timeZone)} to ${formatInstant(lastAt, locale, timeZone)}`;
    words.push(`They come from ${counted(vehicles, "vehicle", "vehicles", locale)} on ${counted(trips ?? 0, "trip", "trips", locale)}, ${span}.`);
  }
  if (report.medianIntervalS !== undefined) words.push(intervalWords(report, locale));
  if (traversals === 0) words.push("No traversal was added.");
  else if (traversals !== undefined) {
    const where = junctionsTotal === undefined ? "" : ` of ${formatNumber(junctionsCovered ?? 0, locale)} of the city's ${counted(junctionsTotal, "junction", "junctions", locale)}`;
    const onLegs = legsFound === undefined ? "" : `, on ${counted(legsFound, "leg", "legs", locale)},`;
    words.push(`${counted(traversals, "traversal", "traversals", locale)}${where}${onLegs} ${traversals === 1 ? "was" : "were"} added.`);
  }
  if (traversals === 0 && !report.knownTraversals) words.push("No vehicle passes a junction that is loaded: are pings and junctions of the same city, and latitude and longitude not mixed up?");
  if (report.knownTraversals) words.push(`${counted(report.knownTraversals, "traversal was", "traversals were", locale)} known from an earlier file and left out.`);
  if (incompleteTraversals) words.push(`${counted(incompleteTraversals, "traversal begins or ends", "traversals begin or end", locale)} inside a junction's window: counted, not scored.`);
  const dropped = [
    report.duplicatePings ? counted(report.duplicatePings, "duplicate ping", "duplicate pings", locale) : null,
    report.jumps ? counted(report.jumps, "impossible jump", "impossible jumps", locale) : null,
  ].filter((part) => part !== null);
  if (report.penetration !== undefined) words.push(`By the queues, the file holds about ${formatShare(report.penetration, locale)} of the traffic at most.`);
  if (dropped.length > 0) words.push(`${dropped.join(" and ")} left out.`);
  return words;
}

function intervalWords({ medianIntervalS, hasSpeed, hasHeading }: IngestReport, locale: string): string {
  const carried = hasSpeed && hasHeading ? "with speed and heading" : hasSpeed ? "with speed, without heading" : hasHeading ? "with heading, without speed" : "without speed and heading";
  const seconds = medianIntervalS ?? 0;
  const caution = seconds >= 15 ? " At this interval stops between two pings are inferred, not seen." : "";
  return `Half of the pings follow the one before within ${formatNumber(seconds, locale, seconds < 10 && seconds % 1 !== 0 ? 1 : 0)} s, ${carried}.${caution}`;
}
