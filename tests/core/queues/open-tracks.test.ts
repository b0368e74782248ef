import { describe, expect, it } from "vitest";
import { legQuarters } from "@/core/queues/leg-quarters";
import { DEFAULT_QUEUE_OPTIONS, QUARTER_MS } from "@/core/queues/options";
import { findStandings } from "@/core/queues/standings";
import { createOpenTrackBuilder, joinOpenTracks } from "@/core/traversals/open-tracks";
import type { OpenTracks } from "@/core/types";
import { oneLeg, passing, stopping, traversalsOf, type TestCourse } from "./one-leg";

const START = 1000 * QUARTER_MS;

/** Pairs of seconds after START and metres to the stop line. */
function openOf(...tracks: [number, number][][]): OpenTracks {
  const builder = createOpenTrackBuilder();
  tracks.forEach((points, vehicle) => {
    builder.add(0, vehicle, Float64Array.from(points, ([t]) => START + t * 1000), Float64Array.from(points, ([, s]) => s), points.length);
  });
  return builder.finish();
}

/** Stands at 200 m, moves up to 150 m and is still there when the file ends. */
const QUEUED: [number, number][] = [[0, 250], [5, 200], [45, 200], [50, 150], [300, 150]];
/** Stands at 120 m for two minutes when its trip ends. */
const PARKED: [number, number][] = [[0, 250], [10, 120], [130, 120]];

const placesOf = (open: OpenTracks): number[] => [...findStandings(oneLeg(), traversalsOf([]), DEFAULT_QUEUE_OPTIONS, open).s];

describe("vehicles that were lost on the leg", () => {
  it("tell where they queued, and say nothing where they may have parked", () => {
    expect(placesOf(openOf(QUEUED))).toEqual([200, 150]);
    expect(placesOf(openOf(PARKED))).toEqual([]);
    // Moved on after a stop: that one was no parking; the last one may be.
    expect(placesOf(openOf([[0, 250], [5, 200], [25, 200], [30, 140], [50, 140]]))).toEqual([200]);
  });

  it("lengthen the queue of a quarter in which others passed", () => {
    const others: TestCourse[] = [stopping(START, 8, 40), passing(START + 600_000)];
    const without = legQuarters(oneLeg(), traversalsOf(others));
    const q = legQuarters(oneLeg(), traversalsOf(others), openOf(QUEUED));
    expect([without.reachM[0], q.reachM[0]]).toEqual([8, 200]);
    expect(q.length).toBe(1);
    expect(q.observedS[0]).toBeGreaterThan(without.observedS[0] + 150);
    const parked = legQuarters(oneLeg(), traversalsOf(others), openOf(PARKED));
    expect(parked.reachM[0]).toBe(8);
  });

  it("make no quarter of their own: the same file given twice brings nothing new", () => {
    expect(legQuarters(oneLeg(), traversalsOf([]), openOf(QUEUED)).length).toBe(0);
  });
});

describe("joinOpenTracks", () => {
  it("keeps order, tracks and the chosen legs", () => {
    const joined = joinOpenTracks([openOf(QUEUED), openOf(PARKED, QUEUED)]);
    expect([...joined.trackOffset]).toEqual([0, 5, 8, 13]);
    expect([...joined.trackS.subarray(5, 8)]).toEqual([250, 120, 120]);
    expect([...joined.trackT.subarray(5, 8)]).toEqual([0, 10, 130]);
    expect(joinOpenTracks([openOf(QUEUED)], (leg) => leg !== 0).length).toBe(0);
  });

  it("leaves a single point out, which tells of no movement", () => {
    expect(openOf([[0, 40]]).length).toBe(0);
  });
});
