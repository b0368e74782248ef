const EQUATOR_RADIUS_M = 6378137;
const FLATTENING = 1 / 298.257223563;

/** Metres to degrees at one origin on the WGS 84 ellipsoid; east is x, north is y. */
export interface Plane {
  lat: number;
  lon: number;
  metresPerDegreeLat: number;
  metresPerDegreeLon: number;
}

export function createPlane(lat: number, lon: number): Plane {
  const e2 = FLATTENING * (2 - FLATTENING);
  const phi = (lat * Math.PI) / 180;
  const root = Math.sqrt(1 - e2 * Math.sin(phi) ** 2);
  return {
    lat,
    lon,
    metresPerDegreeLat: ((EQUATOR_RADIUS_M * (1 - e2)) / root ** 3) * (Math.PI / 180),
    metresPerDegreeLon: (EQUATOR_RADIUS_M / root) * Math.cos(phi) * (Math.PI / 180),
  };
}

export const latFromY = (plane: Plane, y: number) => plane.lat + y / plane.metresPerDegreeLat;
export const lonFromX = (plane: Plane, x: number) => plane.lon + x / plane.metresPerDegreeLon;

/** Degrees clockwise from north in [0, 360) of the step (dx east, dy north). */
export function bearingDeg(dx: number, dy: number): number {
  const degrees = (Math.atan2(dx, dy) * 180) / Math.PI;
  return degrees < 0 ? degrees + 360 : degrees;
}

/** Signed turn from one bearing to another in [-180, 180), positive to the right. */
export function signedTurnDeg(fromDeg: number, toDeg: number): number {
  return ((((toDeg - fromDeg + 540) % 360) + 360) % 360) - 180;
}
