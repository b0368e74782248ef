import { describe, expect, it } from "vitest";
import type { ExitView, MovementView, ProfilePoint } from "@/domain/junction";
import { legDelayWords } from "@/ui/junctions/leg-delay-words";
import { matchingJunctions } from "@/ui/junctions/matching-junctions";
import { movementWords, shortLegName } from "@/ui/junctions/movement-words";
import { profileRuns } from "@/ui/junctions/profile-runs";

describe("words for movements and legs", () => {
  const exits = [{ id: 7, bearingDeg: 88 }, { id: 8, bearingDeg: 140 }] as ExitView[];
  const movement = (id: number, turn: string, exitId: number) => ({ id, turn, exitId }) as MovementView;

  it("names the turn alone where it is the only one of its kind", () => {
    const all = [movement(1, "right", 7), movement(2, "left", 8)];
    expect(movementWords(all[0], all, exits)).toBe("right");
  });

  it("adds where it leads where a leg turns right twice", () => {
    const all = [movement(1, "right", 7), movement(2, "right", 8)];
    expect(all.map((one) => movementWords(one, all, exits))).toEqual(["right, leaving eastbound", "right, leaving south-eastbound"]);
  });

  it("keeps the degrees that tell two legs apart", () => {
    expect(shortLegName({ name: "from the south, northbound" })).toBe("from the south");
    expect(shortLegName({ name: "from the south, northbound (20°)" })).toBe("from the south (20°)");
  });
});

describe("delay of a leg", () => {
  const delay = { value: -2.4, low: -6, high: 1 };

  it("is shown as it is below zero, and marked where nothing supports it", () => {
    expect(legDelayWords({ delay, evidence: "thin" }, "en-GB")).toBe("-2 s delay");
    expect(legDelayWords({ delay: { ...delay, value: 31 }, evidence: "none" }, "en-GB")).toBe("31 s delay, no evidence");
    expect(legDelayWords({ delay: null, evidence: "none" }, "en-GB")).toBe("no figure");
  });
});

describe("search for a junction", () => {
  const junction = (name: string, code: string, corridor: string | null) => ({ id: 1, lat: 0, lon: 0, name, code, corridor });
  const all = [junction("Harbour Road / Mill Lane", "VM014", "Harbour Road"), junction("Café Square", "VM015", null)];

  it("finds every word in any order, whatever its capitals and accents", () => {
    expect(matchingJunctions(all, "lane HARB")).toEqual([all[0]]);
    expect(matchingJunctions(all, "cafe")).toEqual([all[1]]);
    expect(matchingJunctions(all, "vm015")).toEqual([all[1]]);
  });

  it("finds all for an empty search and none for a word that does not occur", () => {
    expect(matchingJunctions(all, "  ")).toEqual(all);
    expect(matchingJunctions(all, "harbour quay")).toEqual([]);
  });
});

describe("day profile", () => {
  it("is cut where a quarter has no figure", () => {
    const point = (fromMin: number, value: number | null) => ({ fromMin, vehicles: 1, delay: value === null ? null : { value, low: value - 1, high: value + 1 }, reachM: null, spill: null }) as ProfilePoint;
    const runs = profileRuns([point(0, 5), point(15, 6), point(30, null), point(45, 7)]);
    expect(runs.map((run) => run.map((one) => one.value))).toEqual([[5, 6], [7]]);
  });
});
