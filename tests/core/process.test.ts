import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { createMatcher, processCity, setReferences, type CityResult } from "@/core/process";
import type { DriveSide, PingColumns, Traversals } from "@/core/types";
import { createH3Index } from "@/geo/h3-index";
import { columnsOf, delayOfStand, makeTown, rowsOf, TOWN, type TownOptions } from "./two-crossings";

const index = createH3Index();

function runTown(options: Partial<TownOptions> = {}, driveSide: DriveSide = "right"): CityResult {
  const town = makeTown(options);
  return processCity(town.pings, town.junctions, index, { driveSide });
}

/** Traversals as comparable lines: vehicle, movement, times and delay, in a fixed order. */
function linesOf(city: Pick<CityResult, "network"> & { traversals: Traversals }, shiftMs = 0): string[] {
  const { network, traversals: t } = city;
  return Array.from({ length: t.length }, (_, i) => {
    const movement = network.movements[t.movement[i]];
    const times = [t.enterMs[i], t.stopLineMs[i], t.exitMs[i]].map((ms) => Math.round((ms - shiftMs) / 10));
    return [t.vehicle[i], movement.id, ...times, t.delayS[i].toFixed(2), t.stops[i], t.farthestStopM[i].toFixed(1)].join(" ");
  }).sort();
}

/** Mean delay and number of traversals by junction and turn. */
function summary(city: CityResult): Map<string, { n: number; meanS: number }> {
  const out = new Map<string, { n: number; meanS: number }>();
  const { network, traversals: t } = city;
  for (let i = 0; i < t.length; i++) {
    const movement = network.movements[t.movement[i]];
    const key = `${network.junctions[network.legs[movement.leg].junction].id} ${movement.turn}`;
    const entry = out.get(key) ?? { n: 0, meanS: 0 };
    entry.meanS = (entry.meanS * entry.n + t.delayS[i]) / (entry.n + 1);
    entry.n += 1;
    out.set(key, entry);
  }
  return out;
}

const town = makeTown();
const whole = runTown();

describe("a town of two crossings", () => {
  it("has the legs and exits that its traffic uses, and no others", () => {
    const bearings = (junction: number): number[] =>
      whole.network.legs.filter((leg) => leg.junction === junction).map((leg) => Math.round(leg.bearingDeg / 90) * 90 % 360).sort((a, b) => a - b);
    expect(bearings(0)).toEqual([0, 90, 180, 270]);
    expect(bearings(1)).toEqual([0, 90, 180, 270]);
    expect(whole.network.exits).toHaveLength(8);
  });

  it("links the street between the crossings both ways, with its storage length", () => {
    const linked = whole.network.legs.filter((leg) => leg.upstreamExit >= 0);
    expect(linked.map((leg) => whole.network.junctions[leg.junction].id).sort()).toEqual(["A", "B"]);
    for (const leg of linked) expect(Math.abs(leg.storageM - (420 - 28))).toBeLessThan(8);
  });

  it("finds every passage of every vehicle", () => {
    // Per eight vehicles: two ways with two through passages, four with one, one left turn, and one with right then right.
    expect([...summary(whole)].map(([key, value]) => [key, value.n]).sort()).toEqual([
      ["A left", 12], ["A right", 12], ["A through", 48], ["B right", 12], ["B through", 48],
    ]);
  });

  it("measures the delay of those that stand and of those that do not", () => {
    const { network, traversals: t } = whole;
    const through = Array.from({ length: t.length }, (_, i) => i).filter((i) => network.movements[t.movement[i]].turn === "through");
    const stood = through.filter((i) => t.stops[i] > 0);
    const passed = through.filter((i) => t.stops[i] === 0);
    expect(stood).toHaveLength(36);
    for (const i of stood) expect(Math.abs(t.delayS[i] - delayOfStand(TOWN.waitS))).toBeLessThan(2);
    for (const i of passed) expect(Math.abs(t.delayS[i])).toBeLessThan(1.5);
  });

  it("sees the first in the queue within a car's length of the stop line", () => {
    for (let i = 0; i < whole.traversals.length; i++) {
      if (whole.traversals.stops[i] > 0) expect(whole.traversals.farthestStopM[i]).toBeLessThan(7);
    }
  });

  it("names legs by compass", () => {
    const names = whole.network.legs.filter((leg) => leg.junction === 0).map((leg) => leg.name).sort();
    expect(names).toEqual(["from the east, westbound", "from the north, southbound", "from the south, northbound", "from the west, eastbound"]);
  });

  it("draws each track downstream along the leg", () => {
    const { trackOffset, trackS, trackT } = whole.traversals;
    for (let i = 0; i < whole.traversals.length; i++) {
      for (let n = trackOffset[i] + 1; n < trackOffset[i + 1]; n++) {
        expect(trackT[n]).toBeGreaterThan(trackT[n - 1]);
        expect(trackS[n]).toBeLessThanOrEqual(trackS[n - 1]);
      }
    }
  });
});

describe("invariance", () => {
  it("moves with the clock and changes nothing else", () => {
    fc.assert(
      fc.property(fc.integer({ min: -1_000_000, max: 1_000_000 }), (seconds) => {
        const shifted = runTown({ startMs: TOWN.startMs + seconds * 1000 });
        expect(linesOf(shifted, seconds * 1000)).toEqual(linesOf(whole));
      }),
      { numRuns: 5 },
    );
  });

  it("gives the same figures for a city turned by any angle", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 359 }), (rotateDeg) => {
        const turned = summary(runTown({ rotateDeg }));
        for (const [key, value] of summary(whole)) {
          expect(turned.get(key)?.n).toBe(value.n);
          expect(Math.abs((turned.get(key)?.meanS ?? NaN) - value.meanS)).toBeLessThan(0.5);
        }
      }),
      { numRuns: 12 },
    );
  });

  it("gives the same figures for the mirror image with the other side of driving", () => {
    const mirrored = summary(runTown({ isMirrored: true }, "left"));
    const other = (key: string): string => key.replace(/left|right/, (turn) => (turn === "left" ? "right" : "left"));
    for (const [key, value] of summary(whole)) {
      expect(mirrored.get(other(key))?.n).toBe(value.n);
      expect(Math.abs((mirrored.get(other(key))?.meanS ?? NaN) - value.meanS)).toBeLessThan(0.5);
    }
  });

  it("does not see the order of the rows, nor rows given twice", () => {
    fc.assert(
      fc.property(fc.shuffledSubarray(rowsOf(town.pings), { minLength: town.pings.length }), fc.integer({ min: 0, max: 900 }), (rows, twice) => {
        const pings = columnsOf([...rows, ...rows.slice(0, twice)]);
        const city = processCity(pings, town.junctions, index, { driveSide: "right" });
        expect(city.clean.duplicates).toBe(Math.min(twice, rows.length));
        expect(linesOf(city)).toEqual(linesOf(whole));
      }),
      { numRuns: 5 },
    );
  });

  it("does not see a vehicle far from all junctions", () => {
    const far = Array.from({ length: 50 }, (_, i) => [TOWN.vehicles, TOWN.startMs + i * 5000, 45.9 + i * 0.0005, -38.3, 11, 0]);
    const city = processCity(columnsOf([...far, ...rowsOf(town.pings)]), town.junctions, index, { driveSide: "right" });
    expect(linesOf(city)).toEqual(linesOf(whole));
  });

  it("changes no mean when every vehicle comes twice, against the same references", () => {
    const twins = rowsOf(town.pings).map(([v, ...rest]) => [v + TOWN.vehicles, ...rest]);
    const { traversals } = createMatcher(whole.network)(columnsOf([...rowsOf(town.pings), ...twins]));
    for (let i = 0; i < traversals.length; i++) {
      const seconds = (traversals.exitMs[i] - traversals.enterMs[i]) / 1000;
      traversals.delayS[i] = seconds - whole.network.movements[traversals.movement[i]].referenceS;
    }
    const doubled = summary({ ...whole, traversals });
    for (const [key, value] of summary(whole)) {
      expect(doubled.get(key)?.n).toBe(2 * value.n);
      expect(doubled.get(key)?.meanS).toBeCloseTo(value.meanS, 4);
    }
  });

  it("gives the whole file's traversals when it is matched in buckets of vehicles", () => {
    const match = createMatcher(whole.network);
    const rows = rowsOf(town.pings);
    const lines = [0, 1, 2].flatMap((bucket) => {
      const part = match(columnsOf(rows.filter(([v]) => v % 3 === bucket)));
      setReferences({ ...whole.network, movements: whole.network.movements.map((m) => ({ ...m })) }, part.traversals);
      return linesOf({ network: whole.network, traversals: withoutDelay(part.traversals) });
    });
    expect(lines.sort()).toEqual(linesOf({ network: whole.network, traversals: withoutDelay(whole.traversals) }));
  });
});

describe("a vehicle whose pings end before the stop line", () => {
  const first = Array.from({ length: whole.traversals.length }, (_, i) => i)
    .filter((i) => whole.traversals.vehicle[i] === 0)
    .sort((a, b) => whole.traversals.stopLineMs[a] - whole.traversals.stopLineMs[b])[0];
  const leg = whole.network.movements[whole.traversals.movement[first]].leg;
  const before = rowsOf(town.pings).filter(([v, tMs]) => v === 0 && tMs < whole.traversals.stopLineMs[first] - 4000);

  it("is no traversal and leaves an open track on its leg", () => {
    const { traversals, openTracks } = createMatcher(whole.network)(columnsOf(before));
    expect(traversals.length).toBe(0);
    expect([...openTracks.leg]).toEqual([leg]);
    for (let p = 1; p < openTracks.trackS.length; p++) expect(openTracks.trackS[p]).toBeLessThanOrEqual(openTracks.trackS[p - 1]);
    expect(openTracks.trackS[openTracks.trackS.length - 1]).toBeGreaterThan(0);
    expect(openTracks.trackS[openTracks.trackS.length - 1]).toBeLessThan(100);
  });

  it("leaves none where it drove on beside the streets", () => {
    const [vehicle, tMs, lat, lon] = before[before.length - 1];
    // 85 m and more off every street, north-east, at 11 m/s.
    const away = Array.from({ length: 12 }, (_, n) => [vehicle, tMs + (n + 1) * 5000, lat + (n + 1) * 0.00035, lon + (n + 1) * 0.0005, 11, 45]);
    expect(createMatcher(whole.network)(columnsOf([...before, ...away])).openTracks.length).toBe(0);
  });
});

const withoutDelay = (t: Traversals): Traversals => ({ ...t, delayS: new Float32Array(t.length) });

describe("earlier and drawn legs", () => {
  it("keeps ids and names from an earlier network, also where a thin file shows no leg", () => {
    const prior = { ...whole.network, legs: whole.network.legs.map((leg) => ({ ...leg, name: `old ${leg.id}` })) };
    const few: PingColumns = columnsOf(rowsOf(town.pings).filter(([v]) => v === 0));
    const city = processCity(few, town.junctions, index, { driveSide: "right" }, prior);
    expect(city.network.legs.map((leg) => leg.id).sort()).toEqual(prior.legs.map((leg) => leg.id).sort());
    expect(city.network.legs.every((leg) => leg.name.startsWith("old "))).toBe(true);
    expect(city.traversals.length).toBe(2);
  });

  it("replaces a junction's derived legs by drawn ones, with their stop line and speed limit", () => {
    const leg = whole.network.legs.find((l) => l.junction === 0 && Math.abs(l.bearingDeg - 90) < 20);
    expect(leg).toBeDefined();
    const given = { junctionId: "A", name: "Mill Lane", lat: Float64Array.of(45.6, 45.6), lon: Float64Array.of(-38.303, -38.30026), speedLimitMs: 10, storageM: 180 };
    const city = processCity(town.pings, town.junctions, index, { driveSide: "right", givenLegs: [given] });
    const legs = city.network.legs.filter((l) => l.junction === 0);
    expect(legs).toHaveLength(1);
    expect(legs[0]).toMatchObject({ name: "Mill Lane", origin: "given", storageM: 180, speedLimitMs: 10 });
    expect(city.network.legs.filter((l) => l.junction === 1)).toHaveLength(4);
  });
});

describe("odd input", () => {
  const none = columnsOf([]);
  const lone = columnsOf([[0, TOWN.startMs, 45.6, -38.3, 10, 0]]);
  const same = [town.junctions[0], { ...town.junctions[0], id: "A again" }, town.junctions[1]];

  it.each([
    ["no pings", none, town.junctions],
    ["no junctions", town.pings, []],
    ["neither", none, []],
    ["one ping", lone, town.junctions],
  ])("finds nothing in %s", (_, pings, junctions) => {
    const city = processCity(pings, junctions, index, { driveSide: "right" });
    expect(city.traversals.length).toBe(0);
    expect(city.network.legs).toEqual([]);
  });

  it("goes through with one junction listed twice at the same place", () => {
    const city = processCity(town.pings, same, index, { driveSide: "right" });
    expect(city.network.junctions).toHaveLength(3);
    expect(city.traversals.length).toBeGreaterThan(0);
  });

  it("gives the clean file's traversals without speeds and headings, delays within 2 s", () => {
    const bare = { ...town.pings, speedMs: new Float32Array(town.pings.length).fill(NaN), headingDeg: new Float32Array(town.pings.length).fill(NaN) };
    const city = processCity(bare, town.junctions, index, { driveSide: "right" });
    expect(city.facts).toMatchObject({ hasSpeed: false, hasHeading: false, medianIntervalS: TOWN.pingS });
    const seen = summary(city);
    for (const [key, value] of summary(whole)) {
      expect(seen.get(key)?.n).toBe(value.n);
      expect(Math.abs((seen.get(key)?.meanS ?? NaN) - value.meanS)).toBeLessThan(2);
    }
  });
});
