const DEG = 180 / Math.PI;

/** Any angle in degrees brought into [0, 360). */
export function normaliseDeg(deg: number): number {
  return ((deg % 360) + 360) % 360;
}

/** Signed change of bearing from `fromDeg` to `toDeg`, positive to the right, in (-180, 180]. */
export function signedTurnDeg(fromDeg: number, toDeg: number): number {
  const turn = normaliseDeg(toDeg - fromDeg + 180) - 180;
  return turn === -180 ? 180 : turn;
}

/** Unsigned angle between two bearings, 0 to 180 degrees. */
export function angleBetweenDeg(aDeg: number, bDeg: number): number {
  const apart = Math.abs(aDeg - bDeg);
  // The remainder of floating numbers is slow, and mostly not needed.
  const d = apart < 360 ? apart : apart % 360;
  return d > 180 ? 360 - d : d;
}

/** Bearing of a step east and north, degrees clockwise from north in [0, 360); NaN for no step at all. */
export function bearingDeg(eastM: number, northM: number): number {
  if (eastM === 0 && northM === 0) return NaN;
  const deg = Math.atan2(eastM, northM) * DEG;
  return deg < 0 ? deg + 360 : deg;
}

const POINTS = ["north", "north-east", "east", "south-east", "south", "south-west", "west", "north-west"] as const;

/** The compass word, of eight, nearest to a bearing. */
export function compassWord(deg: number): (typeof POINTS)[number] {
  return POINTS[Math.round(normaliseDeg(deg) / 45) % 8];
}
