import { describe, expect, it } from "vitest";
import type { TrackSet } from "@/core/strips/track-set";
import type { LegStripView, MovementView } from "@/domain/junction";
import { stripQueryFromParams } from "@/domain/query-address";
import { delayTicks, delayTop, losBands, runsOf, spreadUpwards } from "@/ui/strips/draw-delay";
import { wrapWords } from "@/ui/strips/draw-lines";
import { factsText } from "@/ui/strips/facts-text";
import { daysSeen, pooledStopShare, typicalFacts } from "@/ui/strips/strip-facts";
import { withoutFew } from "@/ui/strips/strip-picture";
import { captionOf, cellsPhrase, legTitle, shapePhrase, weekdayPhrase } from "@/ui/strips/strip-phrases";
import { referenceSentence } from "@/ui/strips/reference-words";
import { figuresParams, tracksParams } from "@/ui/strips/queries";

describe("sentence of a strip", () => {
  const view = {} as LegStripView;
  const parts = { days: "weekdays, 2 to 6 March 2026", hours: "PM peak, 16:00 to 18:30", cellS: 120 };

  it("says in plain words what is drawn", () => {
    const query = stripQueryFromParams({ shape: "waves", wave: "15" });
    expect(captionOf(query, view, parts, "metric", "en-GB")).toBe(
      "A typical day of weekdays, 2 to 6 March 2026, PM peak, 16:00 to 18:30, all movements, cells of 10 m by 2 min along a wave of 15 km/h, as measured.",
    );
  });

  it("names a single day", () => {
    expect(weekdayPhrase("2026-03-03", "en-GB")).toBe("Tuesday 3 March 2026");
    expect(captionOf(stripQueryFromParams({ day: "2026-03-03" }), view, parts, "metric", "en-GB")).toMatch(/^Tuesday 3 March 2026, PM peak/);
  });

  it("speaks of feet and miles an hour where the city does", () => {
    expect(cellsPhrase(10, 45, "us", "en-US")).toBe("33 ft by 45 s");
    expect(shapePhrase({ shape: "waves", wave: 15 }, "us")).toBe("along a wave of 9.3 mph");
  });

  it("titles a leg by where it comes from", () => {
    expect(legTitle({ name: "from the south, northbound" } as LegStripView["leg"])).toBe("Leg from the south, northbound");
    expect(legTitle({ name: "From the south, northbound" } as LegStripView["leg"])).toBe("Leg from the south, northbound");
    expect(legTitle({ name: "Leg of the ferry" } as LegStripView["leg"])).toBe("Leg of the ferry");
    expect(legTitle({ name: "Quay Street" } as LegStripView["leg"])).toBe("Leg Quay Street");
  });
});

describe("reference of the delays", () => {
  const movement = (turn: string, referenceS: number | null, referenceSource: string, vehicles = 9) => ({ turn, referenceS, referenceSource, vehicles }) as MovementView;

  it("is said with its source, movements of one source together", () => {
    const all = [movement("left", 23.4, "shrunk"), movement("through", 20, "unstopped"), movement("right", 22, "unstopped"), movement("uturn", 30, "free-speed", 0)];
    expect(referenceSentence(all, "any", "en-GB")).toBe(
      "Delay is the time beyond what an undelayed vehicle needs: left 23 s (from few vehicles that did not stop, steadied by those of the same turn); through 20 s, right 22 s (from vehicles that did not stop).",
    );
    expect(referenceSentence(all, "right", "en-GB")).toMatch(/: right 22 s/);
    const twoRights = [movement("right", 24, "shrunk"), movement("right", 25, "shrunk"), movement("right", 25.2, "shrunk")];
    expect(referenceSentence(twoRights, "any", "en-GB")).toMatch(/: right 24 s or 25 s by exit \(from few/);
    expect(referenceSentence([movement("left", null, "shrunk")], "any", "en-GB")).toBeNull();
  });
});

describe("what is fetched", () => {
  it("does not change with the cells, nor the tracks with the movement", () => {
    const plain = stripQueryFromParams({ period: "am", day: "2026-03-03" });
    const fine = stripQueryFromParams({ period: "am", day: "2026-03-03", cellM: "5", shape: "waves", paths: "shown", turn: "left" });
    expect(tracksParams(fine)).toBe(tracksParams(plain));
    expect(tracksParams(plain)).toBe("period=am&day=2026-03-03");
    expect(figuresParams({ ...fine, turn: "any" })).toBe(figuresParams(plain));
  });
});

describe("labels", () => {
  it("break between words where the room ends, and never inside one", () => {
    expect(wrapWords("Harbour Road / Custom House Lane behind", 20, (line) => line.length)).toEqual(["Harbour Road /", "Custom House Lane", "behind"]);
    expect(wrapWords("Unbreakable", 3, (line) => line.length)).toEqual(["Unbreakable"]);
  });
});

describe("axis of the delay", () => {
  it("reaches the bound of C at least and leaves an absurdly wide band out", () => {
    expect(delayTop([10], [12])).toBe(40);
    expect(delayTop([100], [110])).toBeCloseTo(116.6, 9);
    expect(delayTop([100], [900])).toBeCloseTo(169.6, 9);
    expect(delayTop([], [])).toBe(40);
  });

  it("has the bounds of the Highway Capacity Manual, Exhibit 19-8, as far as they show", () => {
    expect(losBands(60).map((band) => [band.letter, band.fromS, band.toS])).toEqual([["A", 0, 10], ["B", 10, 20], ["C", 20, 35], ["D", 35, 55], ["E", 55, 60]]);
  });

  it("names the bounds that have room, and whole steps above the last", () => {
    // 118 px for 650 s: 5.5 s a pixel, so that a label needs 77 s; 80 is the first bound with that room.
    expect(delayTicks(650, 118, 14)).toEqual([0, 80, 200, 400, 600]);
    expect(delayTicks(40, 118, 14)).toEqual([0, 10, 20, 35]);
    expect(delayTicks(116.6, 118, 14)).toEqual([0, 20, 35, 55, 80, 100]);
  });

  it("keeps letters apart by moving the upper ones up", () => {
    expect(spreadUpwards([95, 90, 50], 19, 100)).toEqual([94.5, 75.5, 50]);
  });

  it("breaks the curve where nobody passed", () => {
    const values = Float64Array.of(5, NaN, 6, 7);
    const runs = runsOf({ fromS: 0, stepS: 900, vehicles: new Uint32Array(4), meanS: values, lowS: values, highS: values });
    expect(runs.map((run) => run.map((point) => point.tS))).toEqual([[450], [2250, 3150]]);
  });
});

describe("vehicles too few for any grade of evidence", () => {
  it("say nothing about a mean", () => {
    const values = Float64Array.of(5, 6, 7);
    const { vehicles, meanS, highS } = withoutFew({ fromS: 0, stepS: 900, vehicles: Uint32Array.of(10, 9, 2), meanS: values, lowS: values, highS: values });
    expect([[...vehicles], [...meanS], [...highS]]).toEqual([[10, 9, 2], [5, NaN, NaN], [5, NaN, NaN]]);
  });
});

describe("figures under a strip", () => {
  it("count the days on which a vehicle of the movement crossed in the window", () => {
    const set = { tracks: 5, day: Int32Array.of(1, 1, 2, 3, 4) } as TrackSet;
    const window = { fromS: 100, toS: 200, bottomM: 0, topM: 50 };
    // The vehicle of day 2 turned elsewhere, that of day 3 came too late.
    expect(daysSeen({ set, include: Uint8Array.of(1, 1, 0, 1, 1), window }, Float32Array.of(100, 150, 150, 200, 199))).toBe(2);
  });

  it("never count fewer days than a movement was seen on", () => {
    const view = { leg: {}, movements: [{ turn: "left", days: 70, vehicles: 0, stopShare: null }], basis: { days: 90 } } as unknown as LegStripView;
    expect([typicalFacts(view, "any", 60).days, typicalFacts(view, "right", 3).days]).toEqual([70, 3]);
  });

  const movement = (vehicles: number, share: number | null) => ({ vehicles, stopShare: share === null ? null : { value: share, low: 0, high: 1 } }) as MovementView;

  it("pool the share stopping by vehicles, with Wilson's interval", () => {
    const pooled = pooledStopShare([movement(10, 0.5), movement(10, 1), movement(0, null)]);
    // 15 of 20.
    expect(pooled?.value).toBe(0.75);
    // Wilson 95 % of 15/20: 0.5313 to 0.8881 (the complement of 5/20, 0.1119 to 0.4687).
    expect(pooled?.low).toBeCloseTo(0.5313, 4);
    expect(pooled?.high).toBeCloseTo(0.8881, 4);
    expect(pooledStopShare([movement(0, null)])).toBeNull();
  });

  it("are said in one line, what cannot be said left out or said so", () => {
    const facts = { stopShare: null, reachKind: "95th", storageM: 310, days: 19, medianIntervalS: 5, evidence: "fair" } as const;
    const text = factsText({ ...facts, delay: { value: 82, low: 74, high: 91 }, reachM: 268, spill: { value: 0.11, low: 0, high: 1 }, vehicles: 412 }, "metric", "en-GB");
    expect(text).toBe("Mean delay 82 s (95 % interval 74 to 91); 95th percentile of reach 268 m of 310 m; spills back 11 % of the time; 412 vehicles seen on 19 days; a ping every 5 s; evidence: fair.");
    expect(factsText({ ...facts, delay: { value: -2.4, low: -6, high: 1 }, reachM: null, spill: null, vehicles: 3 }, "metric", "en-GB")).toContain("Mean delay -2 s (95 % interval -6 to 1)");
    expect(factsText({ ...facts, delay: null, reachM: null, spill: null, vehicles: 1, days: 1, medianIntervalS: null, evidence: null }, "metric", "en-GB")).toBe("Mean delay cannot be said; 1 vehicle seen on 1 day.");
  });
});
