import { signedTurnDeg } from "@/core/geometry/angles";
import { quantileWithin } from "@/core/traversals/small-quantile";
import type { Network } from "@/core/types";

/** The fastest of free drivers, and their ratio to a driver at the street's usual speed: wishes spread by about 8 %. */
const FAST_QUANTILE = 0.95;
const FAST_RATIO = 1.08;
const LEAST_SPEEDS = 8;
/** Where no leg was measured, m/s. */
const FALLBACK_MS = 13.9;
/** A leg shorter than this shows no free driving; from longM on it counts in full. */
const SHORT_M = 90;
const LONG_M = 240;
const STREET_MOST = 40;
/** A faster neighbour counts this much more: a leg that is never free must not tell its own free speed. */
const FASTER_WEIGHT = 3;
const CITY_WEIGHT = 8;
const STRAIGHT_DEG = 30;
/** Both directions of one street differ less in length, m. */
const SAME_STREET_M = 40;

/**
 * Free speed of each leg in m/s from speeds away from junctions. Short legs, where nobody reaches it, lean on the legs
 * that go straight into or out of them, and all a little on the city's median.
 */
export function estimateFreeSpeeds(network: Network, speeds: number[][]): Float64Array {
  const own = speeds.map((values) => {
    const sorted = [...values].sort((a, b) => a - b);
    return sorted.length >= LEAST_SPEEDS ? quantileWithin(sorted, FAST_QUANTILE) / FAST_RATIO : NaN;
  });
  const weight = speeds.map((values, i) => {
    const share = (network.legs[i].lengthM - SHORT_M) / (LONG_M - SHORT_M);
    return own[i] > 0 ? values.length * Math.min(1, Math.max(0.03, share)) : 0;
  });
  const known = own.filter((value) => value > 0).sort((a, b) => a - b);
  const city = known.length > 0 ? quantileWithin(known, 0.5) : FALLBACK_MS;
  const street = streetNeighbours(network);
  return Float64Array.from(network.legs, (_, i) => {
    let sum = CITY_WEIGHT * city + (own[i] > 0 ? weight[i] * own[i] : 0);
    let total = CITY_WEIGHT + weight[i];
    for (const other of street[i]) {
      const isFaster = !(own[i] >= own[other]);
      const share = Math.min(STREET_MOST, weight[other]) * (isFaster ? FASTER_WEIGHT : 1);
      if (share > 0) {
        sum += share * own[other];
        total += share;
      }
    }
    return sum / total;
  });
}

/** Legs that go on straight from or into each leg, and the other direction of its street. */
function streetNeighbours(network: Network): number[][] {
  const street: number[][] = network.legs.map(() => []);
  const fedBy = new Map<number, number[]>();
  network.legs.forEach((leg, i) => {
    if (leg.upstreamExit >= 0) fedBy.set(leg.upstreamExit, [...(fedBy.get(leg.upstreamExit) ?? []), i]);
  });
  network.legs.forEach((leg, i) => {
    const upstream = leg.upstreamExit >= 0 ? network.exits[leg.upstreamExit].junction : -1;
    network.legs.forEach((other, k) => {
      const isOtherWay = other.junction === upstream && other.upstreamExit >= 0 && network.exits[other.upstreamExit].junction === leg.junction;
      if (isOtherWay && Math.abs(other.lengthM - leg.lengthM) < SAME_STREET_M) street[i].push(k);
    });
  });
  for (const movement of network.movements) {
    const next = fedBy.get(movement.exit);
    if (!next) continue;
    const turn = signedTurnDeg(network.legs[movement.leg].bearingDeg, network.exits[movement.exit].bearingDeg);
    if (Math.abs(turn) > STRAIGHT_DEG) continue;
    for (const leg of next) {
      street[leg].push(movement.leg);
      street[movement.leg].push(leg);
    }
  }
  return street;
}
