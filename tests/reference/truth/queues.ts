import type { Course } from "../simulator/read-trajectories";
import { standingFlags } from "./passages";
import type { LegStreet } from "./street-legs";

const BIN_M = 2;
const LONGEST_M = 800;
/** The column hangs together: its head near the line, small gaps, seen within this time. */
const HEAD_M = 60;
const MEMORY_S = 40;
/** Gaps that the column may have: cars and a lorry when all are seen, more between the seen few. */
export const GAP_ALL_M = 40;
export const GAP_SAMPLE_M = 80;

/**
 * Tail of each leg's standing column in every second, metres from the stop line, 0 without a column.
 * A vehicle counts where its front bumper stands, on this leg's own streets only.
 */
export function tailsBySecond(courses: Iterable<Course>, legs: LegStreet[], seconds: number, gapM: number): Float32Array[] {
  const places = placeOfEdges(legs);
  const standing: number[][][] = legs.map(() => Array.from({ length: seconds }, () => []));
  for (const course of courses) {
    const flags = standingFlags(course);
    for (let i = 0; i < flags.length; i++) {
      if (!flags[i]) continue;
      const second = Math.floor(course.t[i]);
      if (second >= seconds) continue;
      for (const { leg, offsetM, street } of places.get(course.edge[i]) ?? []) {
        const s = offsetM + street.lanes[course.lane[i]].lengthM - course.pos[i];
        if (s >= 0 && s < LONGEST_M) standing[leg][second].push(s);
      }
    }
  }
  return standing.map((positions) => tailOfLeg(positions, gapM));
}

function placeOfEdges(legs: LegStreet[]) {
  const places = new Map<string, { leg: number; offsetM: number; street: LegStreet["chain"][number] }[]>();
  legs.forEach((leg, index) => {
    let offsetM = 0;
    for (const street of leg.chain) {
      const list = places.get(street.id) ?? [];
      list.push({ leg: index, offsetM, street });
      places.set(street.id, list);
      offsetM += street.lengthM;
    }
  });
  return places;
}

function tailOfLeg(standing: number[][], gapM: number): Float32Array {
  const tails = new Float32Array(standing.length);
  const lastSeen = new Float64Array(LONGEST_M / BIN_M).fill(-Infinity);
  for (let second = 0; second < standing.length; second++) {
    for (const s of standing[second]) lastSeen[Math.floor(s / BIN_M)] = second;
    let reachedM = 0;
    for (let bin = 0; bin < lastSeen.length; bin++) {
      const s = bin * BIN_M;
      if (s - reachedM > (reachedM === 0 ? HEAD_M : gapM)) break;
      if (second - lastSeen[bin] < MEMORY_S) reachedM = s + BIN_M;
    }
    for (const s of standing[second]) if (s <= reachedM && s > tails[second]) tails[second] = s;
  }
  return tails;
}
