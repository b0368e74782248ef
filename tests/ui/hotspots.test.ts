import { describe, expect, it } from "vitest";
import { ScreenQuery, type RankedJunction } from "@/domain/screen";
import { plainFinding, reportSentence } from "@/ui/hotspots/report-words";

const ROW: RankedJunction = {
  junctionId: 1, code: "V1", name: "Harbour Road / Mill Lane", lat: 45.6, lon: -38.3, corridorId: 4, corridor: "Harbour Road",
  rank: 1, rankLow: 1, rankHigh: 2, worst: { turn: "left", from: "From the south, northbound", legId: 3, delayS: 104.4 },
  delay: { value: 82.3, low: 74.1, high: 90.6 }, shrunkDelayS: 80, medianS: 70, p95S: 160, los: { at: "F", low: "E", high: "F" },
  hoursSeen: 9, stopsPerVehicle: 1.4, reachM: 268, storageM: 310, spill: { value: 0.11, low: 0.08, high: 0.15 },
  vehicles: 1412, days: 5, evidence: "strong", needles: [],
};
const BASIS = { firstDate: "2026-03-02", lastDate: "2026-03-06", days: 5, traversals: 9, medianIntervalS: 5, methodVersion: 1, fromMin: 960, toMin: 1110 };
const CITY = { units: "metric", locale: "en-GB" } as const;

describe("hotspot report in words", () => {
  it("says what was chosen, and leaves out what was not", () => {
    const all = reportSentence(ScreenQuery.parse({}), { rows: [ROW], total: 248, basis: BASIS }, "en-GB");
    expect(all).toBe("On weekdays, 2 to 6 March 2026, in the PM peak, 16:00 to 18:30, with at least thin evidence: 1 of 248 junctions.");
    const some = reportSentence(ScreenQuery.parse({ minDelay: 35, minSpill: 5, corridor: 4, turn: "left", evidence: "fair" }), { rows: [ROW], total: 248, basis: BASIS }, "en-GB");
    expect(some).toContain("along Harbour Road, left turns only, delayed by 35 s or more, spilling back 5 % of the time or more, with fair or strong evidence");
  });

  it("tells a finding without a trade word", () => {
    expect(plainFinding(ROW, CITY)).toBe(
      "Drivers lose about 82 seconds here (likely 74 to 91): very long waiting. Most is lost turning left from the south, about 104 seconds. " +
        "Its longest queue reaches about 268 m, and fills its street back to the junction behind 11 % of the time.",
    );
  });

  it("keeps silent about queues that the sample cannot see", () => {
    expect(plainFinding({ ...ROW, reachM: null }, CITY)).not.toContain("queue");
    expect(plainFinding({ ...ROW, delay: null }, CITY)).toBe("Too few vehicles were seen to say.");
  });
});
