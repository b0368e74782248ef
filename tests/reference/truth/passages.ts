import type { Course } from "../simulator/read-trajectories";
import type { ExitStreet, LegStreet } from "./street-legs";

const STOP_MS = 5 / 3.6;
const GO_MS = 10 / 3.6;
/** Faster than any vehicle here: the simulator moved it by hand (teleport), so the course is cut. */
const JUMP_MS = 45;
/** The odometer follows chords, the cordon the lane: they differ by a few decimetres. */
const SLACK_M = 3;

export interface RawPassage {
  vehicleId: string;
  leg: LegStreet;
  exit: ExitStreet;
  /** Seconds from the start of the recording. */
  enterS: number;
  stopLineS: number;
  exitS: number;
  stops: number;
  /** Seen from the upstream cordon to the exit cordon, on the streets of leg and exit all the way, and not parked or at a bus stop there. */
  isComplete: boolean;
  /** Edge before the leg and edge after the exit: where the vehicle came from and goes to. */
  context: string[];
}

/** Looks up legs by their edges; built once for a network. */
export interface LegIndex {
  atStopLine: Map<string, LegStreet>;
}

export function indexLegs(legs: LegStreet[]): LegIndex {
  return { atStopLine: new Map(legs.map((leg) => [leg.chain[0].id, leg])) };
}

/**
 * All passages of one vehicle over a stop line. Those of which the cordons were not seen, because the trip or the
 * recording begins or ends between them, are marked: they count as having passed, but have no delay.
 */
export function findPassages(course: Course, index: LegIndex): RawPassage[] {
  const odometer = courseOdometer(course);
  const standing = standingFlags(course);
  const passages: RawPassage[] = [];
  const n = course.t.length;
  for (let i = 0; i < n; i++) {
    const leg = index.atStopLine.get(course.edge[i]);
    if (!leg || (i + 1 < n && course.edge[i + 1] === course.edge[i])) continue;
    let j = i + 1;
    while (j < n && course.edge[j].startsWith(":")) j++;
    const exit = j < n ? leg.exits.find((candidate) => candidate.edge.id === course.edge[j]) : undefined;
    if (!exit) continue;
    passages.push(measure(course, odometer, standing, leg, exit, i, j));
  }
  return passages;
}

function measure(
  course: Course, odometer: Float64Array, standing: Uint8Array, leg: LegStreet, exit: ExitStreet, last: number, first: number,
): RawPassage {
  const toLine = leg.chain[0].lanes[course.lane[last]].lengthM - course.pos[last];
  const lineOdo = odometer[last] + toLine;
  const enterOdo = lineOdo - leg.cordonUpM;
  const boxEndOdo = odometer[first] - course.pos[first];
  const exitOdo = Math.max(boxEndOdo, lineOdo) + exit.cordonDownM;
  let from = last;
  while (from > 0 && odometer[from] > enterOdo) from--;
  let to = first;
  while (to < course.t.length - 1 && odometer[to] < exitOdo) to++;
  const staysOnStreets = () => {
    const legEdges = new Set(leg.chain.map((edge) => edge.id));
    const exitEdges = new Set(exit.chain.map((edge) => edge.id));
    for (let k = from + 1; k < to; k++) {
      const edge = course.edge[k];
      if (odometer[k] > odometer[k - 1] + JUMP_MS * (course.t[k] - course.t[k - 1])) return false;
      const isInside = edge.startsWith(":") || (k <= last ? legEdges.has(edge) : exitEdges.has(edge));
      if (!isInside && odometer[k] > enterOdo + SLACK_M && odometer[k] < exitOdo - SLACK_M) return false;
    }
    return true;
  };
  let stops = 0;
  for (let k = from + 1; k < to; k++) if (standing[k] && !standing[k - 1]) stops++;
  const enterS = timeAt(course, odometer, enterOdo, from, last);
  const exitS = timeAt(course, odometer, exitOdo, first - 1, to);
  const dwelt = course.dwells.some(([begin, end]) => end > enterS && begin < exitS);
  return {
    vehicleId: course.id,
    leg,
    exit,
    enterS,
    stopLineS: timeAt(course, odometer, lineOdo, last, first),
    exitS,
    stops,
    isComplete: !dwelt && odometer[from] <= enterOdo + SLACK_M && odometer[to] >= exitOdo && staysOnStreets(),
    context: contextOf(course, from, to),
  };
}

/** Distance driven, metres: along the lane where the edge stays the same, else the chord. */
function courseOdometer(course: Course): Float64Array {
  const odometer = new Float64Array(course.t.length);
  for (let i = 1; i < odometer.length; i++) {
    const along = course.pos[i] - course.pos[i - 1];
    const chord = Math.hypot(course.x[i] - course.x[i - 1], course.y[i] - course.y[i - 1]);
    odometer[i] = odometer[i - 1] + (course.edge[i] === course.edge[i - 1] ? Math.max(0, along) : chord);
  }
  return odometer;
}

/** 1 from the moment speed falls below 5 km/h until it exceeds 10 km/h. */
export function standingFlags(course: Course): Uint8Array {
  const flags = new Uint8Array(course.t.length);
  let stands = false;
  for (let i = 0; i < flags.length; i++) {
    stands = course.speedMs[i] < (stands ? GO_MS : STOP_MS);
    flags[i] = stands ? 1 : 0;
  }
  return flags;
}

/** First time in samples [from, to] at which the odometer reaches `target`, seconds, linear between samples. */
function timeAt(course: Course, odometer: Float64Array, target: number, from: number, to: number): number {
  for (let k = Math.max(1, from + 1); k <= to; k++) {
    if (odometer[k] < target) continue;
    const step = odometer[k] - odometer[k - 1];
    const part = step > 0 ? Math.min(1, Math.max(0, (target - odometer[k - 1]) / step)) : 0;
    return course.t[k - 1] + part * (course.t[k] - course.t[k - 1]);
  }
  return course.t[to];
}

/** Distinct streets driven from one edge before the cordon to one after the exit. */
function contextOf(course: Course, from: number, to: number): string[] {
  const edges: string[] = [];
  const add = (edge: string) => {
    if (!edge.startsWith(":") && edges[edges.length - 1] !== edge) edges.push(edge);
  };
  for (let k = from; k <= to; k++) add(course.edge[k]);
  for (let k = from; k >= 0; k--) {
    if (course.edge[k].startsWith(":") || course.edge[k] === edges[0]) continue;
    edges.unshift(course.edge[k]);
    break;
  }
  return edges;
}
