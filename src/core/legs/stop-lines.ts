import { angleBetweenDeg } from "@/core/geometry/angles";
import { lengthOf, slice } from "@/core/geometry/polyline";
import { legBearingDeg } from "@/core/legs/draft";
import type { Usage } from "@/core/legs/usage";
import type { Exit, Leg } from "@/core/types";

/** Passages with a stand that a leg needs for a stop line of its own. */
const LEAST_HEADS = 8;
const MOST_HEADS = 200;
/** Spread of positions, and road that one standing vehicle takes, m. */
const SPREAD_M = 4;
const SPACING_M = 7.5;
/** Shares of next to this place in the queue that are tried. */
const FADES = [0.5, 0.65, 0.8, 0.9];
const MOST_IN_QUEUE = 30;
/** Share of stands that are no queue, spread over the range. */
const STRAY_SHARE = 0.03;
const RANGE_M = 200;
const TABLE_FROM_M = -40;
const FROM_M = -15;
const TO_M = 18;
/** Another arm this near, and no nearer, to a leg's own meets it at a sharp angle: then the box is wide and stop lines lie far out. */
const SHARP_FROM_DEG = 12;
const SHARP_TO_DEG = 30;
const SHARP_TO_M = 45;
const STEP_M = 0.5;
/** Half a car and the gap that drivers leave to the line, m. */
const STANDS_BEFORE_M = 3;
/** No leg is made shorter than this, m. */
const LEAST_LENGTH_M = 20;

/** Log density of a standing place at a distance behind the first vehicle's, by fade: index (distance - TABLE_FROM_M) / STEP_M. */
const TABLES = FADES.map(logDensity);

function logDensity(fade: number): Float64Array {
  const table = new Float64Array((RANGE_M - TABLE_FROM_M) / STEP_M + 1);
  const norm = (1 - fade) / (SPREAD_M * Math.sqrt(2 * Math.PI));
  for (let n = 0; n < table.length; n++) {
    let density = 0;
    for (let k = 0; k < MOST_IN_QUEUE; k++) {
      const u = (TABLE_FROM_M + n * STEP_M - k * SPACING_M) / SPREAD_M;
      density += fade ** k * Math.exp(-0.5 * u * u);
    }
    table[n] = Math.log((1 - STRAY_SHARE) * norm * density + STRAY_SHARE / RANGE_M);
  }
  return table;
}

/**
 * Where the stop line lies on a leg's present line, metres upstream of its start: maximum likelihood of a queue whose
 * first vehicle stands there, each next one 7.5 m behind with a fading share. NaN where too few stood. `toM`: farthest place that is looked at. O(heads).
 */
export function findStopLine(heads: number[], toM = TO_M): number {
  if (heads.length < LEAST_HEADS) return NaN;
  const step = Math.max(1, Math.floor(heads.length / MOST_HEADS));
  let best = -Infinity;
  let first = NaN;
  for (let place = FROM_M; place <= toM; place += STEP_M) {
    for (const table of TABLES) {
      let sum = 0;
      for (let i = 0; i < heads.length; i += step) {
        const n = Math.round((heads[i] - place - TABLE_FROM_M) / STEP_M);
        sum += table[Math.max(0, Math.min(table.length - 1, n))];
      }
      if (sum > best) {
        best = sum;
        first = place;
      }
    }
  }
  return first - STANDS_BEFORE_M;
}

/** Moves the stop lines of derived legs to where queues begin; where too few stood, as far out as the junction's others. */
export function placeStopLines(legs: Leg[], exits: Exit[], usage: Pick<Usage, "heads">, carried: Set<string>): Leg[] {
  const isFree = (leg: Leg): boolean =>
    leg.origin === "derived" && !leg.locked && (!carried.has(leg.id) || leg.stopLineOrigin === "default");
  const placed = legs.map((leg, i) => {
    const shift = isFree(leg) ? findStopLine(usage.heads[i], meetsSharply(leg, legs, exits) ? SHARP_TO_M : TO_M) : NaN;
    return Number.isNaN(shift) ? leg : moved(leg, shift, "derived");
  });
  return placed.map((leg) => {
    if (!isFree(leg) || leg.stopLineOrigin !== "default") return leg;
    const others = placed.filter((other) => other.junction === leg.junction && other.stopLineOrigin !== "default").map(outM);
    return others.length === 0 ? leg : moved(leg, others.reduce((sum, m) => sum + m, 0) / others.length - outM(leg), "default");
  });
}

function meetsSharply(leg: Leg, legs: Leg[], exits: Exit[]): boolean {
  const isSharp = (junction: number, outwardDeg: number): boolean => {
    const angle = angleBetweenDeg(leg.bearingDeg + 180, outwardDeg);
    return junction === leg.junction && angle >= SHARP_FROM_DEG && angle <= SHARP_TO_DEG;
  };
  return legs.some((other) => isSharp(other.junction, other.bearingDeg + 180)) || exits.some((exit) => isSharp(exit.junction, exit.bearingDeg));
}

/** Distance of the stop line from the junction's point, m. */
function outM(leg: Leg): number {
  return Math.hypot(leg.line[0], leg.line[1]);
}

function moved(leg: Leg, shift: number, stopLineOrigin: Leg["stopLineOrigin"]): Leg {
  if (shift > 0 && leg.lengthM - shift < LEAST_LENGTH_M) return leg;
  const line = slice(leg.line, shift, leg.lengthM);
  return { ...leg, line, lengthM: lengthOf(line), bearingDeg: legBearingDeg(line), stopLineOrigin };
}
