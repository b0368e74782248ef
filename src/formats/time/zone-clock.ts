import { offsetMinAt } from "@/domain/local-time";

const QUARTER_MS = 900_000;
const DAY_MS = 86_400_000;

/**
 * Turns wall-clock times of one zone into instants. Where clocks go back, the earlier of the two instants
 * is meant; a time that clocks skip is no time (NaN). Offsets are looked up once for each quarter of an hour.
 */
export class ZoneClock {
  private readonly offsets = new Map<number, number>();

  constructor(private readonly timeZone: string) {}

  /** `wallMs` is the wall-clock time read as if it were UTC; what is no time (NaN) stays none. */
  instantMs(wallMs: number): number {
    if (Number.isNaN(wallMs)) return NaN;
    const quarter = Math.floor(wallMs / QUARTER_MS);
    let offset = this.offsets.get(quarter);
    if (offset === undefined) {
      offset = this.wallOffsetMs(quarter * QUARTER_MS);
      this.offsets.set(quarter, offset);
    }
    return wallMs - offset;
  }

  private wallOffsetMs(wallMs: number): number {
    const before = this.offsetMs(wallMs - DAY_MS);
    const after = this.offsetMs(wallMs + DAY_MS);
    // The larger offset is the earlier instant.
    const larger = Math.max(before, after);
    if (this.offsetMs(wallMs - larger) === larger) return larger;
    const smaller = Math.min(before, after);
    return this.offsetMs(wallMs - smaller) === smaller ? smaller : NaN;
  }

  private offsetMs(instantMs: number): number {
    return offsetMinAt(this.timeZone, instantMs) * 60_000;
  }
}
