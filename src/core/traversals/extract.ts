import { eastM, northM } from "@/core/geometry/plane";
import { projectPoint } from "@/core/geometry/polyline";
import type { Box } from "@/core/match/box";
import type { StreetGraph } from "@/core/match/graph";
import type { Chain } from "@/core/match/chains";
import type { Trips } from "@/core/pings/trips";
import type { TraversalBuilder } from "@/core/traversals/columns";
import { createCourse, estimateSpeeds, KNOTS, lastUpTo, smoothForward, timeAt, type Course } from "@/core/traversals/course";
import { fillGaps } from "@/core/traversals/fill-gaps";
import { KNOTS_A_STEP } from "@/core/traversals/share-wait";
import { filledEndMs, filledStartMs } from "@/core/traversals/fill-ends";
import type { OpenTrackBuilder } from "@/core/traversals/open-tracks";
import { summariseStops } from "@/core/traversals/stops";
import { TRAVERSAL_FLAGS } from "@/core/types";

/** Settings of stage 5's crossings. */
export const CROSSING = Object.freeze({
  cordonUpM: 250,
  cordonDownM: 60,
  /** Crossing is judged on a line this far past the stop line, where nobody stands. */
  virtualLineM: 15,
  /** A course must begin this far before the stop line and end this far past it. */
  seenBeforeM: 5,
  seenAfterM: 8,
});

export interface Extractor {
  /**
   * Adds the traversals of one chain; returns how many passages were left out: those that began or ended inside the
   * window of a junction, and the vehicles that ended or left the streets between the cordon and the stop line.
   */
  addChain(chain: Chain): number;
}

/** Turns matched stretches into traversals with crossing times, stops and tracks, and what breaks off on a leg into open tracks. */
export function createExtractor(trips: Trips, graph: StreetGraph, builder: TraversalBuilder, open: OpenTrackBuilder): Extractor {
  const { network } = graph;
  let seen: Course = createCourse(256);
  let course: Course = createCourse(256 * KNOTS_A_STEP);
  let trackMs = new Float64Array(0);
  let trackS = new Float64Array(0);

  return {
    addChain(chain) {
      let cut = endsInWindow(chain, graph) ? 1 : 0;
      const last = chain.links.length - 1;
      // Who drove on beside the streets may have stood only to turn off there.
      const isOpen = graph.leg[chain.links[last]] >= 0 && chain.pings[chain.pings.length - 1] === trips.tripOffset[chain.trip + 1] - 1;
      if (last === 0 && !isOpen) return cut;
      const base = basesOf(chain, graph);
      const size = chain.pings.length;
      if (size > seen.tMs.length) {
        seen = createCourse(size * 2);
        course = createCourse(size * 2 * KNOTS_A_STEP);
      }
      if (trackMs.length < course.tMs.length + 2) {
        trackMs = new Float64Array(course.tMs.length + 2);
        trackS = new Float64Array(course.tMs.length + 2);
      }
      fillCourse(seen, chain, base, trips, graph);
      fillGaps(seen, base.map((at, k) => at + graph.stopAt[chain.links[k]]), course);
      for (let k = 0; k + 1 < chain.links.length; k++) {
        const leg = graph.leg[chain.links[k]];
        const exit = graph.exit[chain.links[k + 1]];
        const { movement } = graph.box(leg, exit);
        if (movement < 0) continue;
        if (!addTraversal(k, movement, chain, base)) cut += 1;
      }
      if (isOpen) {
        const points = fillTrack(base[last], Infinity, NaN, base[last] + graph.stopAt[chain.links[last]]);
        open.add(graph.leg[chain.links[last]], trips.tripVehicle[chain.trip], trackMs, trackS, points);
      }
      return cut;
    },
  };

  function addTraversal(k: number, movement: number, chain: Chain, base: Float64Array): boolean {
    const link = chain.links[k];
    const { cordonUpM, cordonDownM } = network.movements[movement];
    const stopAt = base[k] + graph.stopAt[link];
    const enterAt = stopAt - cordonUpM;
    const exitAt = base[k + 1] + cordonDownM;
    const begin = course.distanceM[0];
    const end = course.distanceM[course.length - 1];
    if (begin > stopAt - CROSSING.seenBeforeM || end < stopAt + CROSSING.seenAfterM) return true;
    const free = graph.freeSpeedMs[link];
    const intervalS = trips.tripIntervalS[chain.trip];
    let flags = 0;
    let enterMs = timeAt(course, enterAt);
    if (begin > enterAt) {
      enterMs = filledStartMs(course, begin - enterAt, free, intervalS, chain.pings[0] === trips.tripOffset[chain.trip]);
      flags |= TRAVERSAL_FLAGS.truncated;
    }
    const exitSeenMs = timeAt(course, exitAt);
    let exitMs = exitSeenMs;
    if (end < exitAt) {
      const isTripEnd = chain.pings[chain.pings.length - 1] === trips.tripOffset[chain.trip + 1] - 1;
      exitMs = filledEndMs(course, exitAt - end, free, intervalS, isTripEnd);
      flags |= TRAVERSAL_FLAGS.truncated;
    }
    if (Number.isNaN(enterMs) || Number.isNaN(exitMs)) return false;
    let stopLineMs = timeAt(course, Math.min(stopAt + CROSSING.virtualLineM, exitAt));
    if (!(stopLineMs >= 0)) stopLineMs = exitMs;
    const stops = summariseStops(course, enterMs, exitMs, base[k], stopAt + 6);
    if (stops.inferred) flags |= TRAVERSAL_FLAGS.stopInferred;
    if (stops.hasLongSteps) flags |= TRAVERSAL_FLAGS.stopsLowerBound;
    const points = fillTrack(base[k], exitAt, exitSeenMs, stopAt);
    builder.add(
      {
        movement, vehicle: trips.tripVehicle[chain.trip], enterMs, stopLineMs, exitMs,
        stops: stops.stops, stoppedS: stops.stoppedS,
        farthestStopM: Number.isNaN(stops.firstStopAtM) ? NaN : Math.max(0, stopAt - stops.firstStopAtM), flags,
      },
      trackMs, trackS, points,
    );
    return true;
  }

  /** The pings between the leg's upstream end and the exit cordon, with one point on each end where it was passed, at `toMs` the far one. */
  function fillTrack(from: number, to: number, toMs: number, stopAt: number): number {
    let n = putPoint(0, timeAt(course, from), stopAt - from);
    let i = lastUpTo(course, from);
    // Several points may lie at the very beginning.
    while (i > 0 && course.distanceM[i - 1] >= from) i -= 1;
    for (; i < course.length && course.distanceM[i] <= to; i++) {
      const isPlace = course.distanceM[i] >= from && course.kind[i] !== KNOTS.unplaced;
      if (isPlace) n = putPoint(n, course.tMs[i], stopAt - course.distanceM[i]);
    }
    return putPoint(n, toMs, stopAt - to);
  }

  /** Adds point n of the track unless its time is unknown or not later; returns how many there are. */
  function putPoint(n: number, tMs: number, s: number): number {
    if (!(tMs >= 0) || (n > 0 && tMs <= trackMs[n - 1])) return n;
    trackMs[n] = tMs;
    trackS[n] = s;
    return n + 1;
  }
}

/** Whether a chain breaks off on a leg, between the cordon and the stop line. */
function endsInWindow(chain: Chain, graph: StreetGraph): boolean {
  const link = chain.links[chain.links.length - 1];
  const toLine = graph.stopAt[link] - chain.position[chain.position.length - 1];
  return graph.leg[link] >= 0 && toLine > 0 && toLine < CROSSING.cordonUpM;
}

/** Path distance at position 0 of each link of a chain. */
function basesOf(chain: Chain, graph: StreetGraph): Float64Array {
  const base = new Float64Array(chain.links.length);
  for (let k = 1; k < base.length; k++) {
    const link = chain.links[k - 1];
    base[k] = base[k - 1] + graph.stopAt[link] + graph.box(graph.leg[link], graph.exit[chain.links[k]]).lengthM;
  }
  return base;
}

/** The pings of the stretch on the path: by the links' lines, inside boxes by the way through. */
function fillCourse(course: Course, chain: Chain, base: Float64Array, trips: Trips, graph: StreetGraph): void {
  let n = 0;
  for (let c = 0; c < chain.pings.length; c++) {
    const i = chain.pings[c];
    const k = chain.step[c];
    const link = chain.links[k];
    const p = chain.position[c];
    let distance = base[k] + p;
    if (p > graph.stopAt[link] - 4 && k + 1 < chain.links.length) {
      const way = graph.box(graph.leg[link], graph.exit[chain.links[k + 1]]);
      distance = base[k] + graph.stopAt[link] + inBox(graph, trips, i, way, graph.leg[link], p - graph.stopAt[link]);
    } else if (p < 4 && k > 0) {
      const before = chain.links[k - 1];
      const way = graph.box(graph.leg[before], graph.exit[link]);
      distance = base[k] - way.lengthM + inBox(graph, trips, i, way, graph.leg[before], p + way.lengthM);
    }
    course.tMs[n] = trips.tMs[i];
    course.distanceM[n] = distance;
    course.speedMs[n] = trips.speedMs[i];
    course.freeMs[n] = graph.freeSpeedMs[link];
    n += 1;
  }
  course.length = n;
  smoothForward(course);
  if (trips.tripHasSpeed[chain.trip] === 0) estimateSpeeds(course);
}

/** Distance along the way through a box; outside its ends the given straight distance holds. */
function inBox(graph: StreetGraph, trips: Trips, i: number, box: Box, leg: number, straight: number): number {
  const plane = graph.planes[graph.network.legs[leg].junction];
  const foot = projectPoint(box.line, eastM(plane, trips.lon[i]), northM(plane, trips.lat[i]));
  if (foot.at <= 0) return Math.min(0, straight);
  if (foot.at >= box.lengthM) return Math.max(box.lengthM, straight);
  return foot.at;
}
