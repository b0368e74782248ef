/** Numbers, dates and units for people. What differs from city to city is an argument; "–" is "the sample cannot say". */
export type Units = "metric" | "us";
type Maybe = number | null | undefined;

export const NO_FIGURE = "–";
const FEET_PER_METRE = 3.280839895;
const MPH_PER_MS = 2.2369362921;

function known(value: Maybe): value is number {
  return value !== null && value !== undefined && Number.isFinite(value);
}

export function formatNumber(value: Maybe, locale: string, digits = 0): string {
  if (!known(value)) return NO_FIGURE;
  // Adding 0 turns -0 into 0, which is what a person expects to read.
  return formatOf(locale, digits).format(Number(value.toFixed(digits)) + 0);
}

const formats = new Map<string, Intl.NumberFormat>();

/** Kept, since making one takes longer than drawing a row of the list. */
function formatOf(locale: string, digits: number): Intl.NumberFormat {
  const key = `${locale} ${digits}`;
  const kept = formats.get(key);
  if (kept) return kept;
  const made = new Intl.NumberFormat(locale, { minimumFractionDigits: digits, maximumFractionDigits: digits });
  formats.set(key, made);
  return made;
}

export function formatSeconds(valueS: Maybe, locale: string, digits = 0): string {
  return known(valueS) ? `${formatNumber(valueS, locale, digits)} s` : NO_FIGURE;
}

/** `share` from 0 to 1. Small shares keep a decimal, so that "0 %" means none. */
export function formatShare(share: Maybe, locale: string): string {
  return known(share) ? `${shareNumber(share, locale)} %` : NO_FIGURE;
}

/** The same without the sign, for columns with "%" in the head. */
export function shareNumber(share: Maybe, locale: string): string {
  if (!known(share)) return NO_FIGURE;
  const percent = share * 100;
  return formatNumber(percent, locale, percent > 0 && percent < 1 ? 1 : 0);
}

export function lengthUnit(units: Units): string {
  return units === "us" ? "ft" : "m";
}

export function lengthFromMetres(valueM: number, units: Units): number {
  return units === "us" ? valueM * FEET_PER_METRE : valueM;
}

export function lengthNumber(valueM: Maybe, units: Units, locale: string): string {
  return known(valueM) ? formatNumber(lengthFromMetres(valueM, units), locale) : NO_FIGURE;
}

export function formatLength(valueM: Maybe, units: Units, locale: string): string {
  return known(valueM) ? `${lengthNumber(valueM, units, locale)} ${lengthUnit(units)}` : NO_FIGURE;
}

export function speedUnit(units: Units): string {
  return units === "us" ? "mph" : "km/h";
}

export function speedFromMs(valueMs: number, units: Units): number {
  return units === "us" ? valueMs * MPH_PER_MS : valueMs * 3.6;
}

export function formatSpeed(valueMs: Maybe, units: Units, locale: string): string {
  return known(valueMs) ? `${formatNumber(speedFromMs(valueMs, units), locale)} ${speedUnit(units)}` : NO_FIGURE;
}

/** Minutes after local midnight as a time of day; 1440 is 24:00. */
export function formatClock(minutes: number): string {
  const whole = Math.round(minutes);
  return `${String(Math.floor(whole / 60)).padStart(2, "0")}:${String(whole % 60).padStart(2, "0")}`;
}

export function formatClockRange(fromMin: number, toMin: number): string {
  return `${formatClock(fromMin)} to ${formatClock(toMin)}`;
}

/** A local calendar day "2026-03-02" as it stands: it belongs to the city already, so no zone is applied. */
export function formatDay(isoDate: string, locale: string): string {
  return new Intl.DateTimeFormat(locale, { dateStyle: "long", timeZone: "UTC" }).format(new Date(`${isoDate}T00:00:00Z`));
}

const rangeFormats = new Map<string, Intl.DateTimeFormat>();

function rangeFormatOf(locale: string): Intl.DateTimeFormat {
  const kept = rangeFormats.get(locale);
  if (kept) return kept;
  const made = new Intl.DateTimeFormat(locale, { day: "numeric", month: "long", year: "numeric", timeZone: "UTC" });
  rangeFormats.set(locale, made);
  return made;
}

export function formatDayRange(first: string, last: string, locale: string): string {
  if (first === last) return formatDay(first, locale);
  const format = rangeFormatOf(locale);
  // Intl sets a thin space round its dash in some versions; words are plainer and the same everywhere.
  const [from, to] = [first, last].map((date) => new Date(`${date}T00:00:00Z`));
  const parts = format.formatRangeToParts(from, to);
  return parts.map((part) => (part.source === "shared" && /[–-]/.test(part.value) ? " to " : part.value)).join("");
}

/** An instant in the city's zone. */
export function formatInstant(iso: string | Date, locale: string, timeZone: string): string {
  return new Intl.DateTimeFormat(locale, { dateStyle: "medium", timeStyle: "short", timeZone }).format(new Date(iso));
}

export function formatBytes(bytes: Maybe, locale: string): string {
  if (!known(bytes)) return NO_FIGURE;
  const units = ["B", "kB", "MB", "GB", "TB"];
  let at = 0;
  let value = bytes;
  for (; value >= 1000 && at < units.length - 1; at++) value /= 1000;
  return `${formatNumber(value, locale, at > 0 && value < 10 ? 1 : 0)} ${units[at]}`;
}

const POINTS = ["north", "north-east", "east", "south-east", "south", "south-west", "west", "north-west"];

/** Compass point of a bearing in degrees clockwise from north. */
export function compassPoint(bearingDeg: number): string {
  return POINTS[((Math.round(bearingDeg / 45) % 8) + 8) % 8];
}

/** "1 junction", "248 junctions". */
export function counted(count: number, one: string, many: string, locale: string): string {
  return `${formatNumber(count, locale)} ${count === 1 ? one : many}`;
}
