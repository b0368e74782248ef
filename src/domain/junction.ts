import { z } from "zod";
import type { Evidence, Origin, ReferenceSource, Turn } from "@/core/types";
import type { EstimateView } from "./estimate";
import { ScreenQuery, type RankedJunction, type ScreenResult } from "./screen";
import { PATHS, SMOOTHING, STRIP_SHAPES } from "./screen-choices";

/** The part of a screen query that says when: what a junction page and a leg strip are opened with. */
export const WhenQuery = ScreenQuery.pick({ period: true, from: true, to: true, days: true, since: true, until: true });
export type WhenQuery = z.infer<typeof WhenQuery>;

/** A junction in a list to choose from. */
export interface ListedJunction {
  id: number;
  code: string;
  name: string;
  lat: number;
  lon: number;
  corridor: string | null;
}

export interface LegView {
  id: number;
  name: string;
  bearingDeg: number;
  /** East and north metres from the junction, from the stop line upstream. */
  line: [number, number][];
  lengthM: number;
  storageM: number | null;
  upstream: { junctionId: number; name: string } | null;
  freeSpeedMs: number | null;
  origin: Origin;
  stopLineOrigin: Origin | "default";
  doubts: string[];
  vehicles: number;
  delay: EstimateView | null;
  reachP50M: number | null;
  reachP95M: number | null;
  /** For the unseen tail: a model, not an observation. */
  reachEstimateP95M: EstimateView | null;
  spill: EstimateView | null;
  evidence: Evidence;
}

export interface ExitView {
  id: number;
  bearingDeg: number;
  line: [number, number][];
}

export interface MovementView {
  id: number;
  legId: number;
  exitId: number;
  turn: Turn;
  turnDeg: number;
  vehicles: number;
  days: number;
  delay: EstimateView | null;
  medianS: number | null;
  p95S: number | null;
  los: { at: string; low: string; high: string } | null;
  stopShare: EstimateView | null;
  stopsPerVehicle: number | null;
  referenceS: number | null;
  referenceSource: ReferenceSource;
  referenceN: number;
  /** Where the delay is counted: metres upstream of the stop line, and metres down the exit from its beginning. */
  cordonUpM: number;
  cordonDownM: number;
  evidence: Evidence;
}

/** One quarter of an hour of the local day. */
export interface ProfilePoint {
  fromMin: number;
  vehicles: number;
  delay: EstimateView | null;
  reachM: number | null;
  spill: number | null;
}

export interface JunctionView extends ListedJunction {
  district: string | null;
  cycleS: number | null;
  lastRetimed: string | null;
  notes: string | null;
  score: RankedJunction | null;
  legs: LegView[];
  exits: ExitView[];
  movements: MovementView[];
  profile: ProfilePoint[];
  basis: ScreenResult["basis"];
}

/** How one leg strip is drawn; the address of the page. The time window comes from WhenQuery. */
export const StripQuery = WhenQuery.extend({
  /** A single day instead of the typical one. */
  day: z.iso.date().optional(),
  turn: ScreenQuery.shape.turn,
  /** Along the wave by default: travel times read off such cells are the nearer to the vehicles' own (tests/reference/strips). */
  shape: z.enum(STRIP_SHAPES).default("waves"),
  /** Backward wave speed, km/h. */
  wave: z.coerce.number().min(10).max(20).default(15),
  cellM: z.coerce.number().min(5).max(50).default(10),
  cellS: z.coerce.number().min(5).max(900).default(120),
  /** Fine cells can be evened out along the two wave directions. */
  smooth: z.enum(SMOOTHING).default("off"),
  paths: z.enum(PATHS).default("hidden"),
});
export type StripQuery = z.infer<typeof StripQuery>;

/** All about a leg but its tracks, which travel as bytes. */
export interface LegStripView {
  junction: { id: number; code: string; name: string };
  leg: LegView;
  movements: MovementView[];
  /** Local days with tracks in the chosen dates, and how many. */
  days: { date: string; tracks: number }[];
  profile: ProfilePoint[];
  basis: ScreenResult["basis"];
}
