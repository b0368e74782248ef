import { describe, expect, it } from "vitest";
import { rejectedCount, reportWords } from "@/ui/uploads/report-words";

describe("a report in words", () => {
  it("tells of pings: rows, vehicles and times of the city, interval, traversals, what was left out", () => {
    const report = {
      rowsRead: 1020,
      accepted: 1000,
      rejected: { time: 15, position: 5 },
      samples: [],
      vehicles: 12,
      trips: 14,
      traversals: 30,
      knownTraversals: 2,
      penetration: 0.05,
      incompleteTraversals: 1,
      duplicatePings: 3,
      jumps: 0,
      junctionsCovered: 4,
      junctionsTotal: 248,
      legsFound: 16,
      firstAt: "2026-03-02T08:00:00.000Z",
      lastAt: "2026-03-02T09:30:00.000Z",
      medianIntervalS: 15,
      hasSpeed: true,
      hasHeading: false,
    };
    expect(rejectedCount(report)).toBe(20);
    // The Azores keep UTC - 1 h in winter.
    expect(reportWords(report, "pings", "en-GB", "Atlantic/Azores")).toEqual([
      "1,020 rows were read: 1,000 accepted, 20 rejected.",
      "They come from 12 vehicles on 14 trips, from 2 Mar 2026, 07:00 to 2 Mar 2026, 08:30.",
      "Half of the pings follow the one before within 15 s, with speed, without heading. At this interval stops between two pings are inferred, not seen.",
      "30 traversals of 4 of the city's 248 junctions, on 16 legs, were added.",
      "2 traversals were known from an earlier file and left out.",
      "1 traversal begins or ends inside a junction's window: counted, not scored.",
      "By the queues, the file holds about 5 % of the traffic at most.",
      "3 duplicate pings left out.",
    ]);
  });

  it("says so where a file brought nothing new", () => {
    const report = { rowsRead: 2, accepted: 2, rejected: {}, samples: [], traversals: 0, junctionsCovered: 0, junctionsTotal: 9, legsFound: 0, knownTraversals: 3 };
    expect(reportWords(report, "pings", "en-GB", "UTC")).toEqual(["2 rows were read: 2 accepted, none rejected.", "No traversal was added.", "3 traversals were known from an earlier file and left out."]);
  });

  it("tells of junctions", () => {
    const report = { rowsRead: 1, accepted: 1, rejected: {}, samples: [], created: 1, updated: 0 };
    expect(reportWords(report, "junctions", "en-GB", "UTC")).toEqual([
      "1 row was read: 1 accepted, none rejected.",
      "1 junction is new, 0 were known before and brought up to date.",
    ]);
  });

  it("tells of drawn legs: how many, where, what they replaced", () => {
    const report = { rowsRead: 3, accepted: 2, rejected: { junction: 1 }, samples: [], legsDrawn: 2, legsReplaced: 1, junctionsTouched: 1 };
    expect(reportWords(report, "legs", "en-GB", "UTC")).toEqual([
      "3 rows were read: 2 accepted, 1 rejected.",
      "2 legs at 1 junction are drawn now; 1 earlier one was replaced.",
      "At these junctions no leg is found in pings any more. Pings that were read in before are matched to the drawn legs anew.",
    ]);
  });
});
