import { z } from "zod";
import type { Evidence, Origin, ReferenceSource, Turn } from "@/core/types";
import { ScreenQuery, type EstimateView, type RankedJunction, type RawParams, type ScreenResult } from "./screen";

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

export interface JunctionView {
  id: number;
  code: string;
  name: string;
  lat: number;
  lon: number;
  corridor: string | null;
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
  shape: z.enum(["rectangles", "waves"]).default("waves"),
  /** Backward wave speed, km/h. */
  wave: z.coerce.number().min(10).max(20).default(15),
  cellM: z.coerce.number().min(5).max(50).default(10),
  cellS: z.coerce.number().min(5).max(900).default(120),
  /** Fine cells can be evened out along the two wave directions. */
  smooth: z.enum(["off", "on"]).default("off"),
  paths: z.enum(["shown", "hidden"]).default("hidden"),
});
export type StripQuery = z.infer<typeof StripQuery>;

/** A hand-edited address never breaks the page: fields that fail fall back to their default. */
export function whenQueryFromParams(params: RawParams): WhenQuery {
  return withWholeWindow(parseLeniently(WhenQuery, params));
}

export function stripQueryFromParams(params: RawParams): StripQuery {
  return withWholeWindow(parseLeniently(StripQuery, params));
}

/** Leaves defaults out, so that two people who look at the same thing have the same address. */
export function whenQueryToParams(query: WhenQuery): URLSearchParams {
  return paramsBesideDefaults(WhenQuery.parse(query), WhenQuery.parse({}));
}

export function stripQueryToParams(query: StripQuery): URLSearchParams {
  return paramsBesideDefaults(query, StripQuery.parse({}));
}

function parseLeniently<T extends z.ZodType>(schema: T, params: RawParams): z.infer<T> {
  const first: Record<string, string | undefined> = {};
  for (const [key, value] of Object.entries(params)) first[key] = Array.isArray(value) ? value[0] : value;
  const strict = schema.safeParse(first);
  if (strict.success) return strict.data;
  for (const issue of strict.error.issues) delete first[String(issue.path[0])];
  return schema.parse(first);
}

function withWholeWindow<Q extends WhenQuery>(query: Q): Q {
  const isWhole = query.from !== undefined && query.to !== undefined && query.from < query.to;
  return isWhole ? query : { ...query, from: undefined, to: undefined };
}

function paramsBesideDefaults(query: Record<string, unknown>, defaults: Record<string, unknown>): URLSearchParams {
  const params = new URLSearchParams();
  for (const [key, value] of Object.entries(query)) {
    if (value !== undefined && value !== defaults[key]) params.set(key, String(value));
  }
  return params;
}

/** A strip of more tracks than this would not be drawn any better; of more, the newest days are shown. */
export const MOST_TRACKS = 20_000;

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
