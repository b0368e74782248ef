import { describe, expect, it } from "vitest";
import { buildCity } from "@seed/network/build-city";
import type { City } from "@seed/network/types";
import { lineLengthM, turnDeg } from "@seed/plane";
import { isWater } from "@seed/plan/land";
import { buildLanes, TURN_BIT } from "@seed/simulation/lanes";

const city = buildCity("demo");
const small = buildCity("small");
const junctionsOf = (of: City) => of.nodes.filter((node) => !node.isGate);

describe("the street network of Varnmouth", () => {
  it("has at least 240 junctions, each with its own identifier and name", () => {
    const junctions = junctionsOf(city);
    expect(junctions.length).toBeGreaterThanOrEqual(240);
    expect(new Set(junctions.map((node) => node.id)).size).toBe(junctions.length);
    expect(new Set(junctions.map((node) => node.name)).size).toBe(junctions.length);
  });

  it("has at least twelve corridors whose junctions are numbered from one without gaps", () => {
    const corridors = new Map<string, number[]>();
    for (const node of junctionsOf(city)) {
      if (node.corridor !== "") corridors.set(node.corridor, [...(corridors.get(node.corridor) ?? []), node.corridorOrder]);
    }
    expect(corridors.size).toBeGreaterThanOrEqual(12);
    for (const orders of corridors.values()) {
      expect(orders.sort((a, b) => a - b)).toEqual(orders.map((_, i) => i + 1));
    }
  });

  it("has T junctions, crossroads, five legs, skewed legs and one-way pairs", () => {
    const legs = junctionsOf(city).map((node) => new Set([...node.inbound.map((l) => city.links[l].from), ...node.outbound.map((l) => city.links[l].to)]).size);
    const count = (n: number) => legs.filter((value) => value === n).length;
    expect(count(3)).toBeGreaterThan(50);
    expect(count(4)).toBeGreaterThan(80);
    expect(count(5)).toBeGreaterThanOrEqual(3);
    const isSkewed = (node: number) => {
      const bearings = city.nodes[node].inbound.map((link) => city.links[link].endBearingDeg);
      return bearings.some((a, i) => bearings.some((b, j) => j > i && Math.abs(turnDeg(a, b)) < 50));
    };
    expect(junctionsOf(city).filter((node) => isSkewed(node.index)).length).toBeGreaterThanOrEqual(3);
    const oneWay = new Set(city.edges.filter((edge) => edge.isOneWay).map((edge) => edge.street));
    expect(oneWay.size).toBeGreaterThanOrEqual(4);
  });

  it("keeps blocks between junctions from 110 to 720 m, and the middle one between 150 and 400 m", () => {
    const lengths = city.edges
      .filter((edge) => !city.nodes[edge.from].isGate && !city.nodes[edge.to].isGate)
      .map((edge) => lineLengthM(edge.line))
      .sort((a, b) => a - b);
    expect(lengths[0]).toBeGreaterThan(110);
    expect(lengths[lengths.length - 1]).toBeLessThan(720);
    expect(lengths[lengths.length >> 1]).toBeGreaterThan(150);
    expect(lengths[lengths.length >> 1]).toBeLessThan(400);
  });

  it("crosses the river on few bridges and puts no junction into the water", () => {
    expect(junctionsOf(city).filter((node) => isWater(node.point)).map((node) => node.id)).toEqual([]);
    const bridges = city.edges.filter((edge) => {
      const samples = Array.from({ length: 21 }, (_, i) => edge.line[Math.min(edge.line.length - 1, Math.round((i / 20) * (edge.line.length - 1)))]);
      return samples.some(isWater);
    });
    expect(bridges.length).toBeGreaterThanOrEqual(3);
    expect(bridges.length).toBeLessThanOrEqual(6);
  });

  it.each([["demo", city], ["small", small]] as const)("lets every vehicle of the %s city go on from every link to every lane it needs", (_, of) => {
    const map = buildLanes(of);
    for (const link of of.links) {
      const movements = of.movementsOf[link.index];
      expect(of.nodes[link.to].isGate || movements.length > 0, `${link.street} to ${of.nodes[link.to].id}`).toBe(true);
      for (const m of movements) {
        const bit = TURN_BIT[of.movements[m].turn];
        expect(map.lastOf[link.index].some((lane) => (map.lanes[lane].turns & bit) !== 0)).toBe(true);
        expect(map.firstOf[link.index].some((lane) => (map.lanes[lane].turns & bit) !== 0)).toBe(true);
      }
    }
  });

  it("gives the small city's junctions the identifiers and places they have in the whole one", () => {
    expect(junctionsOf(small).length).toBeGreaterThanOrEqual(28);
    for (const node of junctionsOf(small)) {
      const same = city.nodes.find((other) => other.id === node.id);
      expect(same?.point).toEqual(node.point);
      expect(same?.name).toBe(node.name);
    }
  });
});
