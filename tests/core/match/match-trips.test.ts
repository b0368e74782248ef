import { describe, expect, it } from "vitest";
import { createGraph } from "@/core/match/graph";
import type { Chain } from "@/core/match/chains";
import { matchTrips } from "@/core/match/match-trips";
import { cleanPings } from "@/core/pings/clean";
import { columnsOf } from "../two-crossings";
import { at, street } from "./small-street";

/** A street through A, B and C; a frontage road lies 45 m south of it. Chains of one vehicle's pings: seconds, east and north metres; speed and heading as given or eastbound at 12 m/s. */
function chainsOf(pings: [number, number, number, number?, number?][]): { chains: Chain[]; legs: string[] } {
  const network = street();
  const graph = createGraph(network);
  const rows = pings.map(([s, x, y, speed = 12, heading = 90]) => [0, s * 1000, at(x, y).lat, at(x, y).lon, speed, heading]);
  const chains: Chain[] = [];
  matchTrips(cleanPings(columnsOf(rows)).trips, graph, (chain) => chains.push({ ...chain }));
  const legs = chains.flatMap((chain) => chain.links.map((l) => (graph.leg[l] >= 0 ? network.junctions[network.legs[graph.leg[l]].junction].id : "open")));
  return { chains, legs };
}

describe("matched paths", () => {
  it("follows a vehicle over the legs that it drives", () => {
    const { legs } = chainsOf([[0, -100, 2], [10, 20, -3], [20, 140, 4], [30, 260, 0]]);
    expect(legs).toEqual(["A", "B", "C"]);
  });

  it("puts the links in that lie between two pings, several junctions apart", () => {
    const { chains, legs } = chainsOf([[0, -100, 0], [45, 440, 0]]);
    expect(legs).toEqual(["A", "B", "C", "open"]);
    expect(chains[0].step).toEqual([0, 3]);
  });

  it("leaves a vehicle on the frontage road alone", () => {
    expect(chainsOf([[0, -100, -45], [10, 20, -45], [20, 140, -45], [30, 260, -45]]).chains).toEqual([]);
  });

  it("leaves a vehicle alone that drives the other way", () => {
    const westbound: [number, number, number, number, number][] = [[0, 260, 0, 12, 270], [10, 140, 0, 12, 270], [20, 20, 0, 12, 270]];
    expect(chainsOf(westbound).chains).toEqual([]);
  });

  it("goes on over one stray ping", () => {
    const { chains, legs } = chainsOf([[0, -100, 0], [10, 20, 0], [15, 80, 60], [20, 140, 0], [30, 260, 0]]);
    expect(legs).toEqual(["A", "B", "C"]);
    expect(chains[0].pings).toEqual([0, 1, 3, 4]);
  });

  it("breaks where a step leads over unknown streets, and loses no ping over it", () => {
    const { chains, legs } = chainsOf([[0, 240, 0], [10, 340, 0], [60, -100, 0], [70, 20, 0], [80, 140, 0]]);
    expect(legs).toEqual(["C", "A", "B"]);
    expect(chains.map((chain) => chain.pings)).toEqual([[0, 1], [2, 3, 4]]);
  });

  it("breaks where a vehicle turns off the street for good", () => {
    const { chains } = chainsOf([[0, -100, 0], [10, -60, 0, 3], [20, -60, -60, 12, 180], [30, -60, -180, 12, 180], [40, -60, -300, 12, 180]]);
    expect(chains).toHaveLength(1);
    expect(chains[0].links).toHaveLength(1);
  });

  it("holds a waiting vehicle in its place through noise of 25 m", () => {
    const wait = Array.from({ length: 14 }, (_, i): [number, number, number, number, number] => [10 + 5 * i, 170 + (i % 3), i % 5 === 4 ? 26 : (i % 2) * 6, 0, 0]);
    const { legs } = chainsOf([[0, 60, 0], [5, 120, 0], ...wait, [85, 230, 0], [95, 350, 0]]);
    expect(legs).toEqual(["B", "C"]);
  });
});
