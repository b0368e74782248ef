/** A vehicle's way over time: distance along its path, growing, with speeds. */
export interface Course {
  length: number;
  tMs: Float64Array;
  /** Metres along the path; never falls (see smoothForward). */
  distanceM: Float64Array;
  /** Reported, else estimated (see estimateSpeeds). */
  speedMs: Float64Array;
  /** Free speed of the street at this point, m/s. */
  freeMs: Float64Array;
  /** One of KNOTS. */
  kind: Uint8Array;
}

/** What a point of a course is: a ping, or put in between by kinematics, at a known or at an unknown place. */
export const KNOTS = { ping: 0, placed: 1, unplaced: 2 } as const;

export function createCourse(size: number): Course {
  return {
    length: 0,
    tMs: new Float64Array(size),
    distanceM: new Float64Array(size),
    speedMs: new Float64Array(size),
    freeMs: new Float64Array(size),
    kind: new Uint8Array(size),
  };
}

/**
 * Makes distances never fall by the least-squares monotone fit (pool adjacent violators; Barlow et al., Statistical
 * Inference under Order Restrictions, 1972), so that a standing vehicle's noise becomes one place. In place, O(n).
 */
export function smoothForward(course: Course): void {
  const { distanceM, length } = course;
  const mean = new Float64Array(length);
  const size = new Uint32Array(length);
  let blocks = 0;
  for (let i = 0; i < length; i++) {
    mean[blocks] = distanceM[i];
    size[blocks] = 1;
    blocks += 1;
    while (blocks > 1 && mean[blocks - 2] > mean[blocks - 1]) {
      const total = size[blocks - 2] + size[blocks - 1];
      mean[blocks - 2] = (mean[blocks - 2] * size[blocks - 2] + mean[blocks - 1] * size[blocks - 1]) / total;
      size[blocks - 2] = total;
      blocks -= 1;
    }
  }
  let i = 0;
  for (let b = 0; b < blocks; b++) for (let n = 0; n < size[b]; n++) distanceM[i++] = mean[b];
}

/**
 * Speeds from the distances alone, for suppliers that report none: the harmonic mean of the steps before and after
 * (as in Fritsch and Butland's monotone interpolation, 1984), so that a step without movement means a standing vehicle.
 */
export function estimateSpeeds(course: Course): void {
  let before = NaN;
  for (let i = 0; i < course.length; i++) {
    const seconds = i + 1 < course.length ? (course.tMs[i + 1] - course.tMs[i]) / 1000 : NaN;
    const after = seconds > 0 ? (course.distanceM[i + 1] - course.distanceM[i]) / seconds : NaN;
    if (Number.isNaN(before)) course.speedMs[i] = after;
    else if (Number.isNaN(after)) course.speedMs[i] = before;
    else course.speedMs[i] = before + after > 0 ? (2 * before * after) / (before + after) : 0;
    before = after;
  }
}

/**
 * Time at which the course passes a distance, by the monotone cubic Hermite curve between the two points around it
 * (Fritsch and Carlson, Monotone Piecewise Cubic Interpolation, 1980) with their speeds, linear where one is missing.
 * NaN outside the course. Where the vehicle stands exactly there, the end of its wait.
 */
export function timeAt(course: Course, distanceM: number): number {
  const { length } = course;
  if (length === 0 || distanceM < course.distanceM[0] || distanceM > course.distanceM[length - 1]) return NaN;
  const low = lastUpTo(course, distanceM);
  if (low === length - 1 || course.distanceM[low] === distanceM) return course.tMs[low];
  return timeWithin(course, low, distanceM);
}

/** The last point that lies no farther than a distance; the first where none does. O(log n). */
export function lastUpTo({ distanceM, length }: Course, wantedM: number): number {
  let low = 0;
  let high = length - 1;
  // Invariant: distance[low] <= wanted, if any is; distance[high + 1] > wanted or high is the last.
  while (low < high) {
    const mid = (low + high + 1) >> 1;
    if (distanceM[mid] <= wantedM) low = mid;
    else high = mid - 1;
  }
  return low;
}

function timeWithin(course: Course, i: number, distanceM: number): number {
  const span = (course.tMs[i + 1] - course.tMs[i]) / 1000;
  const step = course.distanceM[i + 1] - course.distanceM[i];
  const secant = step / span;
  let v0 = course.speedMs[i];
  let v1 = course.speedMs[i + 1];
  const wanted = (distanceM - course.distanceM[i]) / step;
  if (!(v0 >= 0 && v1 >= 0)) return course.tMs[i] + wanted * span * 1000;
  const norm = Math.sqrt(v0 * v0 + v1 * v1) / secant;
  if (norm > 3) {
    v0 *= 3 / norm;
    v1 *= 3 / norm;
  }
  return course.tMs[i] + whereCubic(v0 / secant, v1 / secant, wanted) * span * 1000;
}

/** Steps of u beyond this precision are less than a microsecond of time. */
const FINE = 1e-8;

/** Where in [0, 1] the monotone cubic from 0 to 1 with slopes a and b at its ends takes a value: Newton's method, kept within its bracket. */
function whereCubic(a: number, b: number, wanted: number): number {
  const square = 3 - 2 * a - b;
  const cube = a + b - 2;
  let low = 0;
  let high = 1;
  let u = wanted;
  for (let n = 0; n < 40; n++) {
    const value = u * (a + u * (square + u * cube));
    if (value < wanted) low = u;
    else high = u;
    let next = u - (value - wanted) / (a + u * (2 * square + 3 * u * cube));
    if (!(next > low && next < high)) next = (low + high) / 2;
    if (Math.abs(next - u) < FINE) return next;
    u = next;
  }
  return u;
}
