import { describe, expect, it } from "vitest";
import type { LegOfCheck, LegToCheck } from "@/domain/leg-check";
import type { Point } from "@/ui/junctions/plan-geometry";
import { directionColor, DIRECTION_RING } from "@/ui/legs/cloud-colors";
import { changesOf, textsOf, typingFaults } from "@/ui/legs/leg-edit";
import { pointAlong, shiftAt, shiftedLine } from "@/ui/legs/leg-shape";
import { standingWords } from "@/ui/legs/leg-words";
import { matchingLegs } from "@/ui/legs/matching-legs";

const LEG: LegOfCheck = {
  id: 5,
  name: "from the south, northbound",
  bearingDeg: 0,
  line: [[0, -20], [0, -120], [50, -120]],
  lengthM: 150,
  storageM: 140.4,
  freeSpeedMs: 13,
  speedLimitMs: 50 / 3.6,
  lanes: null,
  upstream: null,
  origin: "derived",
  stopLineOrigin: "derived",
  locked: false,
  support: 40,
  doubts: [],
};

const listed = (id: number, junction: string, part: Partial<LegToCheck> = {}): LegToCheck => ({
  id, name: "from the south, northbound", bearingDeg: 0, junction: { id, code: `J${id}`, name: junction }, doubts: [], support: 9, storageM: null, origin: "derived", locked: false, ...part,
});

describe("the list of legs", () => {
  const legs = [listed(1, "Long Road / Café Row", { doubts: ["Only 3 trips show this leg."] }), listed(2, "Mill Lane", { locked: true }), listed(3, "Mill Row")];

  it("is searched by every word, whatever capitals and accents, in junction and leg", () => {
    expect(matchingLegs(legs, "all", "cafe NORTH").map((leg) => leg.id)).toEqual([1]);
    expect(matchingLegs(legs, "all", "mill").map((leg) => leg.id)).toEqual([2, 3]);
    expect(matchingLegs(legs, "all", "j3").map((leg) => leg.id)).toEqual([3]);
  });

  it("shows doubtful or locked legs only, on request", () => {
    expect(matchingLegs(legs, "doubtful", "").map((leg) => leg.id)).toEqual([1]);
    expect(matchingLegs(legs, "locked", "lane").map((leg) => leg.id)).toEqual([2]);
  });

  it("says in short how a leg stands", () => {
    expect(legs.map(standingWords)).toEqual(["1 doubt", "locked", "found in the pings"]);
  });
});

describe("a stop line that is moved", () => {
  it("goes upstream along the leg, or straight on towards the junction", () => {
    expect(shiftedLine(LEG.line, 8)).toEqual([[0, -28], [0, -120], [50, -120]]);
    // The former stop line stays a vertex of the straight piece.
    expect(shiftedLine(LEG.line, -5)).toEqual([[0, -15], [0, -20], [0, -120], [50, -120]]);
    // 30 m must remain of a leg of 150 m.
    expect(shiftedLine(LEG.line, 120)).not.toBeNull();
    expect(shiftedLine(LEG.line, 121)).toBeNull();
  });

  it("follows the pointer beside the leg, by whole metres and 60 at most", () => {
    expect(shiftAt(LEG.line, [4, -32.4])).toBe(12);
    expect(shiftAt(LEG.line, [4, -11])).toBe(-9);
    expect(shiftAt(LEG.line, [0, -110])).toBe(60);
  });
});

describe("a line drawn without a pointer", () => {
  it("goes on by bearing and length from the junction or the point before", () => {
    const first = pointAlong([], 90, 15);
    expect(first).toEqual([15, 0]);
    const line: Point[] = [first];
    expect(pointAlong(line, 0, 100)).toEqual([15, 100]);
    // 100 m to the north-east: 100 / sqrt 2 = 70.7 m each way.
    expect(pointAlong(line, 45, 100)).toEqual([85.7, 70.7]);
  });
});

describe("the form of a leg", () => {
  it("sends nothing where nothing was changed, whatever the rounding shows", () => {
    const texts = textsOf(LEG, "metric");
    expect(texts).toEqual({ name: LEG.name, speedLimit: "50", storage: "140", lanes: "", locked: false });
    expect(changesOf(LEG, texts, 0, "metric")).toBeNull();
  });

  it("sends what differs; an emptied field takes the value away", () => {
    const texts = { ...textsOf(LEG, "metric"), name: "Mill Lane", speedLimit: "", storage: "120,5", lanes: "2" };
    expect(changesOf(LEG, texts, 8, "metric")).toEqual({ legId: 5, name: "Mill Lane", speedLimitKmh: null, storageM: 120.5, lanes: 2, stopLineShiftM: 8 });
  });

  it("reads US customary units", () => {
    // 140.4 m = 460.6 ft, 50 km/h = 31.07 mph; 100 ft = 30.48 m, 30 mph = 48.28 km/h.
    const texts = textsOf(LEG, "us");
    expect(texts).toMatchObject({ speedLimit: "31", storage: "461" });
    const edit = changesOf(LEG, { ...texts, speedLimit: "30", storage: "100" }, 0, "us");
    expect(edit?.storageM).toBeCloseTo(30.48, 6);
    expect(edit?.speedLimitKmh).toBeCloseTo(48.28032, 6);
  });

  it("says which field holds no number", () => {
    expect(typingFaults({ name: " ", speedLimit: "fast", storage: "12", lanes: "", locked: false })).toEqual({ name: "Give the leg a name.", speedLimit: "This is not a number." });
  });
});

describe("pings by direction", () => {
  it("close the ring: 0 and 360 degrees are one hue, and negative headings are read", () => {
    expect(directionColor(0)).toBe(DIRECTION_RING[0].color);
    expect(directionColor(360)).toBe(directionColor(0));
    expect(directionColor(-90)).toBe(DIRECTION_RING[3].color);
  });
});
