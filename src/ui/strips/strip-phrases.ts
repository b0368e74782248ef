import type { Turn } from "@/core/types";
import type { LegStripView, StripQuery } from "@/domain/junction";
import { formatLength, type Units } from "@/ui/format";

/** The words of a strip's sentence, one function for each phrase that is a control. */

export const MOVEMENT_PHRASES: Record<Turn | "any", string> = {
  any: "all movements",
  left: "left turns",
  through: "through traffic",
  right: "right turns",
  uturn: "U-turns",
};

export const TYPICAL_DAY = "typical day";

/** "Tuesday 3 March 2026" of a local calendar day. */
export function weekdayPhrase(isoDate: string, locale: string): string {
  const options = { weekday: "long", day: "numeric", month: "long", year: "numeric", timeZone: "UTC" } as const;
  return new Intl.DateTimeFormat(locale, options).format(new Date(`${isoDate}T00:00:00Z`)).replace(",", "");
}

export function cellSecondsPhrase(cellS: number): string {
  return cellS < 60 ? `${cellS} s` : `${cellS / 60} min`;
}

export function cellsPhrase(cellM: number, cellS: number, units: Units, locale: string): string {
  return `${formatLength(cellM, units, locale)} by ${cellSecondsPhrase(cellS)}`;
}

export function shapePhrase(query: Pick<StripQuery, "shape" | "wave">, units: Units): string {
  return query.shape === "waves" ? `along a wave of ${wavePhrase(query.wave, units)}` : "upright";
}

export function wavePhrase(waveKmh: number, units: Units): string {
  return units === "us" ? `${Math.round((waveKmh / 1.609344) * 10) / 10} mph` : `${waveKmh} km/h`;
}

export const SMOOTH_PHRASES: Record<StripQuery["smooth"], string> = { off: "as measured", on: "smoothed" };

/** Title of a leg's page: "Leg from the south, northbound". */
export function legTitle(leg: LegStripView["leg"]): string {
  if (/^leg\b/i.test(leg.name)) return leg.name;
  return `Leg ${leg.name.replace(/^From\b/, "from")}`;
}

/** The sentence as plain text, for the picture that leaves the page. */
export function captionOf(query: StripQuery, view: LegStripView, parts: { days: string; hours: string; cellS: number }, units: Units, locale: string): string {
  const day = query.day === undefined ? `A ${TYPICAL_DAY} of ${parts.days}` : weekdayPhrase(query.day, locale);
  const cells = `cells of ${cellsPhrase(query.cellM, parts.cellS, units, locale)} ${shapePhrase(query, units)}, ${SMOOTH_PHRASES[query.smooth]}`;
  return `${day}, ${parts.hours}, ${MOVEMENT_PHRASES[query.turn]}, ${cells}.`;
}
