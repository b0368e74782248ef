import { describe, expect, it } from "vitest";
import { learnFromTrips } from "@/core/legs/learn-network";
import { learningPings } from "@/core/legs/learning";
import { learningSample, nearShare } from "@/core/legs/learning-sample";
import { cleanPings } from "@/core/pings/clean";
import { sampleTrips } from "@/core/pings/sample-trips";
import type { Trips } from "@/core/pings/trips";
import { createH3Index } from "@/geo/h3-index";
import { columnsOf, makeTown, rowsOf } from "../two-crossings";

const index = createH3Index();

describe("what learning takes", () => {
  it("asks for 1,500 pings a junction, more where they are frequent", () => {
    expect(learningPings(500, 5)).toBe(750_000);
    expect(learningPings(500, 30)).toBe(750_000);
    expect(learningPings(500, NaN)).toBe(750_000);
    expect(learningPings(100, 2)).toBe(375_000);
    expect(learningPings(100, 0.2)).toBe(750_000);
  });

  it("asks for all of a small file", () => {
    expect(learningPings(10, 5)).toBe(300_000);
  });

  it("counts only pings near junctions", () => {
    const { junctions } = makeTown();
    // One of four stands at a crossing, the others some 11 km north of it.
    const lat = Float64Array.from({ length: 40 }, (_, i) => junctions[0].lat + (i % 4 === 0 ? 0 : 0.1));
    const lon = new Float64Array(40).fill(junctions[0].lon);
    expect(nearShare({ length: 40, lat, lon }, junctions, index)).toBe(0.25);
    expect(nearShare({ length: 0, lat, lon }, junctions, index)).toBe(0.01);
  });

  it("finds in a sample of much traffic the streets that all of it shows", () => {
    const { pings, junctions } = makeTown({ vehicles: 960 });
    const { trips } = cleanPings(pings);
    const shape = (of: Trips) =>
      learnFromTrips(of, junctions, index, { driveSide: "right" }).legs.map((leg) => [leg.junction, leg.name, leg.upstreamExit >= 0].join(" ")).sort();
    expect(shape(sampleTrips(trips, trips.length / 4))).toEqual(shape(trips));
  });

  it("takes all of little traffic", () => {
    const { trips } = cleanPings(columnsOf(rowsOf(makeTown().pings).slice(0, 100)));
    expect(learningSample(trips, makeTown().junctions, index)).toBe(trips);
  });
});
