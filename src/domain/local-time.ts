/** Offset from UTC that holds from `fromMs` on; tables are sorted by it. */
export interface OffsetSpan {
  fromMs: number;
  offsetMin: number;
}

const DAY_MS = 86_400_000;
const formatters = new Map<string, Intl.DateTimeFormat>();

function formatterOf(timeZone: string): Intl.DateTimeFormat {
  let formatter = formatters.get(timeZone);
  if (!formatter) {
    formatter = new Intl.DateTimeFormat("en-US", {
      timeZone,
      hourCycle: "h23",
      year: "numeric",
      month: "numeric",
      day: "numeric",
      hour: "numeric",
      minute: "numeric",
      second: "numeric",
    });
    formatters.set(timeZone, formatter);
  }
  return formatter;
}

/** Minutes that local clocks are ahead of UTC at the moment. */
export function offsetMinAt(timeZone: string, ms: number): number {
  const part: Record<string, number> = {};
  for (const { type, value } of formatterOf(timeZone).formatToParts(ms)) part[type] = Number(value);
  const local = Date.UTC(part.year, part.month - 1, part.day, part.hour, part.minute, part.second);
  return Math.round((local - Math.floor(ms / 1000) * 1000) / 60_000);
}

/** The offsets in force between two moments, changes found to the minute. */
export function offsetTable(timeZone: string, fromMs: number, toMs: number): OffsetSpan[] {
  const spans: OffsetSpan[] = [{ fromMs, offsetMin: offsetMinAt(timeZone, fromMs) }];
  for (let left = fromMs; left < toMs; left += DAY_MS) {
    const right = Math.min(left + DAY_MS, toMs);
    const after = offsetMinAt(timeZone, right);
    if (after === spans[spans.length - 1].offsetMin) continue;
    let low = left;
    let high = right;
    while (high - low > 60_000) {
      const middle = Math.floor((low + high) / 2);
      if (offsetMinAt(timeZone, middle) === after) high = middle;
      else low = middle;
    }
    // Clocks change on whole minutes, and one of them lies in this last one.
    spans.push({ fromMs: Math.floor(high / 60_000) * 60_000, offsetMin: after });
  }
  return spans;
}

export function isoFromDay(day: number): string {
  return new Date(day * DAY_MS).toISOString().slice(0, 10);
}

export function dayFromIso(date: string): number {
  return Math.round(Date.parse(`${date}T00:00:00Z`) / DAY_MS);
}

/** 0 is Sunday. */
export function weekdayOf(day: number): number {
  return (((day + 4) % 7) + 7) % 7;
}

/** 990 becomes 16:30; 1440 becomes 24:00. */
export function clockText(minutes: number): string {
  return `${String(Math.floor(minutes / 60)).padStart(2, "0")}:${String(minutes % 60).padStart(2, "0")}`;
}
