import { pickFromCumulative, type RandomStream } from "../random";
import type { Trips } from "../simulation/state";
import { shareOfPeak, type DayKind, type Period } from "./pattern";

export interface TripOptions {
  day: DayKind;
  period: Period;
  /** Local time at second 0 of the simulation, minutes after midnight. */
  zeroMin: number;
  endS: number;
  /** The day's demand against the ordinary day's. */
  dayFactor: number;
  /** Cumulative shares of the fleets among all vehicles, ending below 1: the rest is unseen. */
  fleetShares: number[];
}

const SLOWEST_PACE = 0.84;
const SLACK_SIGMA_S = 0.25;

/** Departures as a Poisson process whose rate follows the period's profile. */
export function drawTrips(rates: Float64Array, options: TripOptions, random: RandomStream): Trips {
  const cumulative = Float64Array.from(rates);
  for (let i = 1; i < cumulative.length; i++) cumulative[i] += cumulative[i - 1];
  const perSecond = (cumulative[cumulative.length - 1] / 3600) * options.dayFactor;
  const capacity = Math.ceil(perSecond * options.endS * 1.3) + 1000;
  const trips: Trips = {
    length: 0, departS: new Float64Array(capacity), route: new Int32Array(capacity),
    pace: new Float32Array(capacity), slackS: new Float32Array(capacity), fleet: new Int8Array(capacity),
  };
  let atS = 0;
  while (trips.length < capacity) {
    const rate = perSecond * shareOfPeak(options.day, options.period, options.zeroMin + atS / 60);
    atS += -Math.log(1 - random.next()) / rate;
    if (atS >= options.endS) break;
    const i = trips.length++;
    trips.departS[i] = atS;
    trips.route[i] = pickFromCumulative(cumulative, random.next());
    trips.pace[i] = SLOWEST_PACE + (1 - SLOWEST_PACE) * Math.sqrt(random.next());
    trips.slackS[i] = Math.abs(random.normal()) * SLACK_SIGMA_S - 0.08;
    trips.fleet[i] = fleetOf(options.fleetShares, random.next());
  }
  return trips;
}

function fleetOf(shares: number[], u: number): number {
  for (let i = 0; i < shares.length; i++) if (u < shares[i]) return i;
  return -1;
}
