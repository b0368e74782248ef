import type { SpeedUnit, TimeFormat } from "@/domain/upload";

/** From here on a number of seconds would lie in the year 5138: it counts milliseconds. */
const FIRST_MS_EPOCH = 1e11;
const EARTH_RADIUS_M = 6_371_008.8;
const MIN_PAIRS = 20;

/** The format most of the values have; null where none of them looks like a time. */
export function timeFormatOf(values: readonly string[]): TimeFormat | null {
  const votes: Record<TimeFormat, number> = { iso: 0, local: 0, local_mdy: 0, local_dmy: 0, epoch_s: 0, epoch_ms: 0 };
  const slashed = slashedOrder(values);
  for (const value of values) {
    const format = SLASHED.test(value) ? (slashed === "dmy" ? "local_dmy" : "local_mdy") : formatOfTime(value);
    if (format !== null) votes[format] += 1;
  }
  const [best, count] = Object.entries(votes).reduce((a, b) => (b[1] > a[1] ? b : a));
  return count === 0 ? null : (best as TimeFormat);
}

const SLASHED = /^(\d{1,2})\/(\d{1,2})\/\d{4} \d{1,2}:\d{2}/;

/** What comes first in dates with slashes: a part above 12 is a day. Null where no value tells, and where they contradict each other. */
export function slashedOrder(values: readonly string[]): "mdy" | "dmy" | null {
  const parts = values.map((value) => SLASHED.exec(value)).filter((match) => match !== null);
  const dayFirst = parts.filter(([, first]) => Number(first) > 12).length;
  const monthFirst = parts.filter(([, , second]) => Number(second) > 12).length;
  if (dayFirst === monthFirst) return null;
  return dayFirst > monthFirst ? "dmy" : "mdy";
}

function formatOfTime(value: string): TimeFormat | null {
  if (/^\d{9,16}([.,]\d+)?$/.test(value)) return Number.parseFloat(value) >= FIRST_MS_EPOCH ? "epoch_ms" : "epoch_s";
  const isCalendar = /^(\d{4}[-/]\d{2}[-/]\d{2}|\d{2}\.\d{2}\.\d{4}|\d{8})[Tt ]\d{2}:?\d{2}/.test(value);
  if (!isCalendar) return null;
  return /(z|utc|[+-]\d{2}(:?\d{2})?)$/i.test(value.slice(11)) ? "iso" : "local";
}

export function hasDecimalComma(values: readonly string[]): boolean {
  const commas = values.filter((value) => /^[+-]?\d+,\d+$/.test(value)).length;
  return commas > 0 && commas * 2 > values.filter((value) => value !== "").length;
}

export interface SpeedSample {
  vehicle: string;
  tS: number;
  lat: number;
  lon: number;
  speed: number;
}

/**
 * The unit in which the reported speeds agree with the way the vehicles went, by the median ratio over pairs of
 * pings of one vehicle at most 30 s apart; null where too few vehicles moved.
 */
export function speedUnitOf(samples: readonly SpeedSample[]): SpeedUnit | null {
  const last = new Map<string, SpeedSample>();
  const ratios: number[] = [];
  for (const sample of samples) {
    const before = last.get(sample.vehicle);
    last.set(sample.vehicle, sample);
    if (before === undefined) continue;
    const seconds = sample.tS - before.tS;
    const wayM = distanceM(before, sample);
    const reported = (before.speed + sample.speed) / 2;
    if (!(seconds > 0 && seconds <= 30 && wayM > 25 && reported > 0)) continue;
    ratios.push(wayM / seconds / reported);
  }
  if (ratios.length < MIN_PAIRS) return null;
  const median = ratios.sort((a, b) => a - b)[ratios.length >> 1];
  const candidates: [SpeedUnit, number][] = [["kmh", 1 / 3.6], ["mph", 0.44704], ["ms", 1]];
  const misfit = (msPerUnit: number) => Math.abs(Math.log(median / msPerUnit));
  return candidates.reduce((a, b) => (misfit(b[1]) < misfit(a[1]) ? b : a))[0];
}

function distanceM(a: SpeedSample, b: SpeedSample): number {
  const toRad = Math.PI / 180;
  const north = (b.lat - a.lat) * toRad * EARTH_RADIUS_M;
  const east = (b.lon - a.lon) * toRad * EARTH_RADIUS_M * Math.cos(a.lat * toRad);
  return Math.hypot(north, east);
}
