import { describe, expect, it } from "vitest";
import { ScreenQuery, type RankedJunction } from "@/domain/screen";
import { explainJunction, movementName } from "@/ui/screens/explain";
import { daysPhrase, minDelayPhrase, windowPhrase } from "@/ui/screens/phrases";
import { screenAddressFromParams, screenAddressToParams, whenSuffix } from "@/ui/screens/screen-address";
import { figuresParams } from "@/ui/screens/queries";

const CITY = { units: "metric", locale: "en-GB" } as const;
const ROW: RankedJunction = {
  junctionId: 1, code: "V1", name: "Harbour Road / Mill Lane", lat: 45.6, lon: -38.3, corridorId: null, corridor: null,
  rank: 2, rankLow: 1, rankHigh: 4, worst: { turn: "left", from: "From the south, northbound", legId: 3, delayS: 104.4 },
  delay: { value: 82.3, low: 74.1, high: 90.6 }, shrunkDelayS: 80, medianS: 70, p95S: 160, los: { at: "F", low: "E", high: "F" },
  hoursSeen: 9, stopsPerVehicle: 1.4, reachM: 268, storageM: 310, spill: { value: 0.11, low: 0.08, high: 0.15 },
  vehicles: 1412, days: 5, evidence: "strong", needles: [],
};

describe("explanation of a junction", () => {
  it("says delay, queue, standing and sample", () => {
    expect(explainJunction(ROW, CITY)).toBe(
      "A vehicle loses 82 s on average (74 to 91); turning left from the south, 104 s. " +
        "On the fullest leg the queue reaches 268 m of the 310 m it has (95th percentile of what was seen) and spills back 11 % of the time. " +
        "For the rank it counts as 80 s, drawn towards the city’s mean by how few were seen; with other vehicles in the sample the rank could be anything from 1 to 4. 1,412 vehicles seen on 5 days: strong evidence.",
    );
  });

  it("says nothing of a rank that is certain and of a mean that stays what it is", () => {
    const certain = { ...ROW, shrunkDelayS: 82.1, rankLow: 2, rankHigh: 2 };
    expect(explainJunction(certain, CITY)).not.toContain("rank");
  });

  it("never reads no data as no delay", () => {
    const unseen = { ...ROW, rank: null, delay: null, vehicles: 0 };
    expect(explainJunction(unseen, CITY)).toBe("No vehicle was seen here in these hours. That is no figure, and it does not mean no delay.");
    expect(explainJunction({ ...unseen, vehicles: 1 }, CITY)).toContain("Only 1 vehicle was seen");
  });

  it("does not take unseen spillback for none", () => {
    const told = (high: number) => explainJunction({ ...ROW, spill: { value: 0, low: 0, high } }, CITY);
    expect(told(0.234)).toContain("no spillback was seen, though up to 23 % of the time could have gone unseen.");
    expect(told(0.02)).toContain("no spillback was seen.");
  });

  it("says when the sample cannot tell the reach, and speaks feet where the city does", () => {
    expect(explainJunction({ ...ROW, reachM: null }, CITY)).toContain("this sample cannot say");
    expect(explainJunction(ROW, { ...CITY, units: "us" })).toContain("879 ft of the 1,017 ft");
  });

  it("names a movement by its turn and leg", () => {
    expect(movementName(ROW.worst!)).toBe("left from the south");
    expect(movementName({ ...ROW.worst!, from: "Quay Street, slip" })).toBe("left from Quay Street");
  });
});

describe("phrases", () => {
  const basis = { firstDate: "2026-03-02", lastDate: "2026-03-06", days: 5, traversals: 1, medianIntervalS: 5, methodVersion: 1, fromMin: 960, toMin: 1110 };

  it("say days and hours as they are", () => {
    expect(daysPhrase({ days: "weekdays" }, basis, "en-GB")).toBe("weekdays, 2 to 6 March 2026");
    expect(daysPhrase({ days: "saturday" }, undefined, "en-GB")).toBe("Saturdays");
    // Asked for, and no data there: the address still shows in the sentence.
    const none = { ...basis, firstDate: null, lastDate: null };
    expect(daysPhrase({ days: "weekdays", since: "2030-01-02" }, none, "en-GB")).toBe("weekdays from 2 January 2030");
    expect(daysPhrase({ days: "weekdays", until: "2020-01-02" }, none, "en-GB")).toBe("weekdays until 2 January 2020");
    expect(windowPhrase({ period: "pm" }, basis)).toBe("PM peak, 16:00 to 18:30");
    expect(windowPhrase({ period: "pm", from: 960, to: 1110 }, basis)).toBe("16:00 to 18:30");
    expect(minDelayPhrase(0)).toBe("by any time");
  });
});

describe("address of the screen", () => {
  it("survives the round trip and leaves defaults out", () => {
    const query = ScreenQuery.parse({ period: "am", minDelay: 35, corridor: 4, q: "mill" });
    const params = screenAddressToParams({ query, at: 12 });
    expect(params.toString()).toBe("period=am&minDelay=35&corridor=4&q=mill&at=12");
    expect(screenAddressFromParams(params)).toEqual({ query, at: 12 });
    expect(screenAddressToParams({ query: ScreenQuery.parse({}), at: null }).toString()).toBe("");
  });

  it("does not break on nonsense", () => {
    expect(screenAddressFromParams(new URLSearchParams("at=x&minDelay=-4&period=noon"))).toEqual({ query: ScreenQuery.parse({}), at: null });
  });

  it("hands on when, and fetches for what decides the figures only", () => {
    const query = ScreenQuery.parse({ period: "am", since: "2026-03-02", turn: "left", minDelay: 35, sort: "delay" });
    expect(whenSuffix(query)).toBe("?period=am&since=2026-03-02");
    expect(figuresParams(query)).toBe("period=am&since=2026-03-02&turn=left");
  });
});
