import { describe, expect, it } from "vitest";
import { redrawNetwork } from "@/core/legs/redraw";
import type { GivenLeg } from "@/core/options";
import type { Leg, Network } from "@/core/types";

/** Metres for a degree at 45.6 N. */
const PER_LAT = 111_143.5;
const PER_LON = 78_010.7;
const HOME = { id: "A", lat: 45.6, lon: -38.3 };

function leg(id: string, junction: number, bearingDeg: number, part: Partial<Leg> = {}): Leg {
  const [east, north] = [-Math.sin((bearingDeg * Math.PI) / 180), -Math.cos((bearingDeg * Math.PI) / 180)];
  return {
    id, junction, name: id, bearingDeg, line: Float64Array.of(15 * east, 15 * north, 215 * east, 215 * north), lengthM: 200, upstreamExit: -1, storageM: NaN,
    freeSpeedMs: 12, speedLimitMs: NaN, origin: "derived", stopLineOrigin: "derived", locked: false, support: 50, doubts: [], ...part,
  };
}

/** A line in the direction of travel that ends 20 m before A. */
function drawn(bearingDeg: number, part: Partial<GivenLeg> = {}, fromM = 320): GivenLeg {
  const [east, north] = [-Math.sin((bearingDeg * Math.PI) / 180), -Math.cos((bearingDeg * Math.PI) / 180)];
  const at = (m: number) => ({ lat: HOME.lat + (north * m) / PER_LAT, lon: HOME.lon + (east * m) / PER_LON });
  const [from, to] = [at(fromM), at(20)];
  return { junctionId: "A", lat: Float64Array.of(from.lat, to.lat), lon: Float64Array.of(from.lon, to.lon), speedLimitMs: NaN, storageM: NaN, ...part };
}

/** A in the middle, B 340 m west of it. */
function network(...legs: Leg[]): Network {
  const west = { id: "B", lat: HOME.lat, lon: HOME.lon - 340 / PER_LON };
  return { junctions: [HOME, west], legs, exits: [], movements: [], driveSide: "right" };
}

describe("drawn lines over a known network", () => {
  it("take the id of the leg on the same bearing, drop the others there, and leave other junctions alone", () => {
    const known = network(leg("A:in:000", 0, 0), leg("A:in:092", 0, 92, { speedLimitMs: 14 }), leg("B:in:090", 1, 90));
    const { network: now, legIds } = redrawNetwork(known, [drawn(90), drawn(180)]);
    expect(legIds).toEqual(["A:in:092", "A:in:180"]);
    expect(now.legs.map((one) => one.id)).toEqual(["B:in:090", "A:in:092", "A:in:180"]);
    expect(now.legs[0]).toBe(known.legs[2]);
    expect(now.legs[1]).toMatchObject({ origin: "given", speedLimitMs: 14, freeSpeedMs: 12, support: 50 });
    expect(now.legs[1].lengthM).toBeCloseTo(300, 0);
  });

  it("keep a locked leg, also one that no line is drawn for", () => {
    const known = network(leg("A:in:000", 0, 0, { locked: true }), leg("A:in:090", 0, 90, { locked: true }));
    const { network: now, legIds } = redrawNetwork(known, [drawn(90), drawn(180)]);
    expect(legIds).toEqual([null, "A:in:180"]);
    expect(now.legs.slice(0, 2)).toEqual(known.legs);
  });

  it("give two lines near one leg an id each, the nearer bearing the old one", () => {
    const { legIds } = redrawNetwork(network(leg("A:in:090", 0, 90)), [drawn(90), drawn(75)]);
    expect(legIds).toEqual(["A:in:090", "A:in:075"]);
  });

  it("join a line that begins at another junction to its exit, and take the street for its storage", () => {
    const { network: now } = redrawNetwork(network(), [drawn(90), drawn(0, { storageM: 80 })]);
    expect(now.exits[now.legs[0].upstreamExit].junction).toBe(1);
    expect(now.legs[0].storageM).toBeCloseTo(300, 0);
    expect(now.legs[1]).toMatchObject({ storageM: 80, upstreamExit: -1 });
  });
});
