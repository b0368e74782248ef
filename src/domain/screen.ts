import { z } from "zod";
import { TURNS, type Evidence, type Turn } from "@/core/types";
import type { EstimateView } from "./estimate";
import { PERIOD_KEYS } from "./periods";
import { DAY_TYPES, EVIDENCE_FLOORS, SORT_KEYS } from "./screen-choices";

const Quarter = z.coerce.number().int().min(0).max(1440).multipleOf(15);
const IsoDate = z.iso.date();

/**
 * What a screen shows: page address, list, map, export and published report all hold this one object.
 * `query-address.ts` reads the same from an address.
 */
export const ScreenQuery = z.object({
  period: z.enum(PERIOD_KEYS).default("pm"),
  /** A window of its own replaces the period: minutes after local midnight. */
  from: Quarter.optional(),
  to: Quarter.optional(),
  days: z.enum(DAY_TYPES).default("weekdays"),
  since: IsoDate.optional(),
  until: IsoDate.optional(),
  turn: z.enum(["any", ...TURNS]).default("any"),
  /** Seconds per vehicle. */
  minDelay: z.coerce.number().min(0).max(600).default(0),
  /** Only junctions with a leg that spills back at least this share of the time, in per cent. */
  minSpill: z.coerce.number().min(0).max(100).default(0),
  evidence: z.enum(EVIDENCE_FLOORS).default("thin"),
  corridor: z.coerce.number().int().positive().optional(),
  q: z.string().trim().max(80).default(""),
  sort: z.enum(SORT_KEYS).default("rank"),
  dir: z.enum(["asc", "desc"]).optional(),
});
export type ScreenQuery = z.infer<typeof ScreenQuery>;

export interface NeedleView {
  legId: number;
  /** Direction in which the leg lies, seen from the junction: its bearing plus 180. */
  lieDeg: number;
  reachM: number | null;
  delayS: number | null;
}

export interface RankedJunction {
  junctionId: number;
  code: string;
  name: string;
  lat: number;
  lon: number;
  corridorId: number | null;
  corridor: string | null;
  /** Null for junctions whose evidence is "none": they are listed last and never ranked. */
  rank: number | null;
  /** 95 % interval of the rank. */
  rankLow: number | null;
  rankHigh: number | null;
  worst: { turn: Turn; from: string; legId: number; delayS: number } | null;
  delay: EstimateView | null;
  /** Mean delay after empirical Bayes shrinkage: what the rank goes by. */
  shrunkDelayS: number | null;
  medianS: number | null;
  p95S: number | null;
  /** Level-of-service letters at the ends of the interval and at the mean. */
  los: { at: string; low: string; high: string } | null;
  /** Hours of delay of the vehicles seen. */
  hoursSeen: number | null;
  stopsPerVehicle: number | null;
  /** 95th percentile of observed reach on the worst leg, and its storage. */
  reachM: number | null;
  storageM: number | null;
  spill: EstimateView | null;
  vehicles: number;
  days: number;
  evidence: Evidence;
  needles: NeedleView[];
}

export interface ScreenResult {
  rows: RankedJunction[];
  /** Junctions of the city, filters aside. */
  total: number;
  /** What the figures rest on. */
  basis: {
    firstDate: string | null;
    lastDate: string | null;
    days: number;
    traversals: number;
    medianIntervalS: number | null;
    methodVersion: number;
    /** Start and end of the window in minutes after local midnight. */
    fromMin: number;
    toMin: number;
    /** Files on these dates that an earlier method has read: left out until they are read in again. Absent where there are none. */
    waitingFiles?: number;
    /** Earlier days that are left out, since the server does not hold as many at a time. Absent where there are none. */
    daysLeftOut?: number;
  };
}

export interface CorridorName {
  id: number;
  name: string;
}

/** A published report in the list of them. */
export interface ListedReport {
  id: string;
  title: string;
  publishedAt: string;
}
