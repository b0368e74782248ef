import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { eastM, northM } from "@/core/geometry/plane";
import { createGraph, type StreetGraph } from "@/core/match/graph";
import { MATCHING } from "@/core/match/matching";
import { matchTrips } from "@/core/match/match-trips";
import { SEGMENT } from "@/core/match/segments";
import { cleanPings } from "@/core/pings/clean";
import type { Trips } from "@/core/pings/trips";
import { columnsOf } from "../two-crossings";
import { at, ORIGIN, street } from "./small-street";

const graph = createGraph(street());

/** One place on each link that a ping may have been at, straight from the definition, nothing left out for its cost. */
function placesOf(trips: Trips, i: number): { link: number; position: number; cost: number }[] {
  const best = new Map<number, { link: number; position: number; cost: number }>();
  for (let n = 0; n < graph.segments.count; n++) {
    const link = graph.segments.link[n];
    const plane = graph.planes[graph.home[link]];
    const [x, y, ux, uy, length, start, bearing] = graph.segments.columns.subarray(n * SEGMENT.width, n * SEGMENT.width + 7);
    const [px, py] = [eastM(plane, trips.lon[i]) - x, northM(plane, trips.lat[i]) - y];
    const along = Math.min(length, Math.max(0, px * ux + py * uy));
    const side = Math.hypot(px - along * ux, py - along * uy);
    const off = Math.abs(bearing - trips.headingDeg[i]);
    const angle = off > 180 ? 360 - off : off;
    const isFast = trips.speedMs[i] > MATCHING.headingMinSpeedMs;
    if (side > MATCHING.sideLimitM || (isFast && angle > MATCHING.headingLimitDeg)) continue;
    const position = start + along;
    const isInBox = position < 5 || position > graph.stopAt[link] - 5;
    const share = angle / (isInBox ? MATCHING.boxHeadingSpreadDeg : MATCHING.headingSpreadDeg);
    const heading = Number.isNaN(angle) ? 0 : Math.min(MATCHING.headingMostCost, (isFast ? 0.5 : 0.2) * share ** 2);
    const cost = 0.5 * (side / MATCHING.sideSpreadM) ** 2 + heading;
    if (!(cost >= (best.get(link)?.cost ?? Infinity))) best.set(link, { link, position, cost });
  }
  return [...best.values()];
}

function stepCost({ stopAt, routes }: StreetGraph, a: { link: number; position: number }, b: { link: number; position: number }, chord: number, seconds: number): number {
  let way = b.position - a.position;
  let cost = 0;
  if (a.link !== b.link || way < -MATCHING.loopM) {
    const row = routes.find(a.link, b.link, MATCHING.routeMostM);
    if (row < 0) return Infinity;
    way = stopAt[a.link] - a.position + routes.wayM[row] + b.position;
    cost = routes.cost[row];
  }
  const reach = MATCHING.fastestMs * seconds + MATCHING.reachSpareM;
  cost += Math.max(0, -way - MATCHING.backFreeM) / MATCHING.backSpreadM + Math.max(0, way - reach) / MATCHING.reachSpreadM;
  return cost + Math.abs(Math.max(0, way) - chord) / (MATCHING.detourM + MATCHING.detourShare * chord);
}

/** Link of each ping on the cheapest of all paths, -1 off the network: Viterbi over every pair of states. */
function cheapestPath(trips: Trips): number[] {
  const states = Array.from({ length: trips.length }, (_, i) => [...placesOf(trips, i), null]);
  let cost = states[0].map((state) => (state ? state.cost : MATCHING.offCost));
  const back: number[][] = [];
  for (let i = 1; i < trips.length; i++) {
    const chord = Math.hypot(eastM(ORIGIN, trips.lon[i]) - eastM(ORIGIN, trips.lon[i - 1]), northM(ORIGIN, trips.lat[i]) - northM(ORIGIN, trips.lat[i - 1]));
    const seconds = (trips.tMs[i] - trips.tMs[i - 1]) / 1000;
    const { leaveCost, joinCost, offCost } = MATCHING;
    const steps = states[i].map((to) =>
      states[i - 1].map((from, p) => {
        if (!from) return cost[p] + (to ? joinCost : 0);
        return cost[p] + (to ? Math.min(stepCost(graph, from, to, chord, seconds), leaveCost + joinCost) : leaveCost);
      }),
    );
    back.push(steps.map((row) => row.indexOf(Math.min(...row))));
    cost = states[i].map((to, c) => Math.min(...steps[c]) + (to ? to.cost : offCost));
  }
  let state = cost.indexOf(Math.min(...cost));
  const path: number[] = [];
  for (let i = trips.length - 1; i >= 0; i--) {
    path.unshift(states[i][state]?.link ?? -1);
    if (i > 0) state = back[i - 1][state];
  }
  return path;
}

describe("the matched path", () => {
  it("is the cheapest of all, whatever is left out on the way to it", () => {
    const ping = fc.record({
      step: fc.double({ min: -20, max: 130, noNaN: true }), y: fc.double({ min: -34, max: 34, noNaN: true }),
      heading: fc.double({ min: 0, max: 359, noNaN: true }), isAlong: fc.boolean(), speed: fc.constantFrom(0, 4, 12), wait: fc.constantFrom(5, 10, 30),
    });
    let placed = 0;
    fc.assert(
      fc.property(fc.array(ping, { minLength: 3, maxLength: 9 }), (pings) => {
        let [x, s] = [-170, 0];
        const rows = pings.map(({ step, y, heading, isAlong, speed, wait }) => {
          x += step;
          s += wait;
          return [0, s * 1000, at(x, y).lat, at(x, y).lon, speed, isAlong ? 90 + (heading - 180) / 9 : heading];
        });
        const { trips } = cleanPings(columnsOf(rows));
        fc.pre(trips.count === 1);
        const expected = cheapestPath(trips);
        matchTrips(trips, graph, (chain) => {
          placed += chain.pings.length;
          expect(chain.pings.map((i) => expected[i])).toEqual(chain.step.map((k) => chain.links[k]));
        });
      }),
      { numRuns: 300 },
    );
    expect(placed).toBeGreaterThan(300);
  });
});
