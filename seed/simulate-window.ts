import type { DayKind, Window } from "./demand/pattern";
import { drawTrips } from "./demand/trips";
import { FLEETS, PENETRATION } from "./probes/fleets";
import { createGeometry, type Geometry } from "./probes/positions";
import { createRecorder } from "./probes/recorder";
import { writePings } from "./probes/sample";
import type { PingWriter } from "./output/ping-writer";
import { createRandomStream } from "./random";
import { CITY_SEED, type Scenario } from "./scenario";
import { simulate } from "./simulation/engine";
import { createTruth, type MovementTruth } from "./simulation/state";
import type { SimulationResult } from "./simulation/traffic";

export interface DayPlan {
  /** Local calendar day, YYYY-MM-DD. */
  date: string;
  kind: DayKind;
  factor: number;
}

export interface WindowRun {
  result: SimulationResult;
  truth: MovementTruth;
  trips: number;
  probes: number;
}

const WARM_UP_S = 900;
export const TRUTH_BIN_S = 900;
/** The Azores keep UTC-1 until the last Sunday of March. */
export const UTC_OFFSET_MIN = -60;

/** Simulates one window of one day and writes what the probe vehicles report. */
export function simulateWindow(scenario: Scenario, day: DayPlan, window: Window, writer: PingWriter | null, geometry?: Geometry): WindowRun {
  const { city, map, demand, plans } = scenario;
  const lengthS = (window.endMin - window.startMin) * 60;
  const endS = WARM_UP_S + lengthS;
  const seeds = [CITY_SEED, Date.parse(day.date) / 86_400_000, window.startMin];
  const penetration = PENETRATION[scenario.scale];
  let sum = 0;
  const fleetShares = FLEETS.map((fleet) => (sum += fleet.share * penetration));
  const trips = drawTrips(
    demand.rates[day.kind === "saturday" ? "midday" : window.period],
    { day: day.kind, period: window.period, zeroMin: window.startMin - WARM_UP_S / 60, endS, dayFactor: day.factor, fleetShares },
    createRandomStream(...seeds, 1),
  );
  const recorder = createRecorder(city, trips);
  const reader = geometry ?? createGeometry(city, map);
  const zeroMs = Date.parse(`${day.date}T00:00:00Z`) + (window.startMin - UTC_OFFSET_MIN) * 60_000 - WARM_UP_S * 1000;
  const truth = createTruth(city, WARM_UP_S, endS, TRUTH_BIN_S);
  const numbers = new Int32Array(FLEETS.length);
  let probes = 0;
  const dayLetter = day.date.slice(8);

  const result = simulate({
    city, map, routes: demand.routes, plan: plans[window.period], trips, endS, truth,
    isWatched: (trip) => writer !== null && trips.fleet[trip] >= 0,
    onPassage: recorder.onPassage,
    onEnd(trip) {
      const recording = recorder.take(trip);
      if (!recording || !writer) return;
      const fleet = FLEETS[trips.fleet[trip]];
      // Numbers start anew with each window: the same vehicle is on the road in the morning and in the evening.
      const number = ++numbers[trips.fleet[trip]];
      probes++;
      writePings(
        recording, reader.readPath(recording),
        {
          fleet, vehicle: Buffer.from(`${fleet.prefix}${dayLetter}-${number}`), zeroMs, fromS: WARM_UP_S, untilS: endS,
          isParked: demand.routes[trips.route[trip]].endsAtAccess, blurAt: scenario.blurAt,
        },
        createRandomStream(...seeds, 2, trip), writer,
      );
    },
  });
  return { result, truth, trips: trips.length, probes };
}

