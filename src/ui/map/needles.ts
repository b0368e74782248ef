import type { Feature, FeatureCollection, LineString } from "geojson";
import { eastM, latAt, lonAt, northM, planeAt } from "@/core/geometry/plane";
import type { NeedleView, RankedJunction } from "@/domain/screen";

type Placed = Pick<RankedJunction, "junctionId" | "lat" | "lon" | "needles">;

/** Shortest needle, so that a leg without a queue, or without a figure, still shows which way it lies. */
export const SHORTEST_NEEDLE_M = 18;

const RAD = Math.PI / 180;

/** Longitude and latitude of a needle's end: from the junction the way the leg lies, as far as its reach is on the ground. */
export function needleEnd({ lat, lon }: Pick<Placed, "lat" | "lon">, { lieDeg, reachM }: Pick<NeedleView, "lieDeg" | "reachM">): [lon: number, lat: number] {
  const plane = planeAt(lat, lon);
  const lengthM = Math.max(SHORTEST_NEEDLE_M, reachM ?? 0);
  return [lonAt(plane, Math.sin(lieDeg * RAD) * lengthM), latAt(plane, Math.cos(lieDeg * RAD) * lengthM)];
}

const LINK_LONGEST_M = 1200;
const LINK_HALF_ANGLE_DEG = 22;

/**
 * Where a city has no base map: a line from each leg to the nearest junction in its direction, once for each pair.
 * A drawing aid, not a street. Cost: legs times junctions.
 */
export function linkFeatures(junctions: readonly Placed[]): FeatureCollection<LineString> {
  const drawn = new Set<string>();
  const features: Feature<LineString>[] = [];
  for (const from of junctions) {
    for (const { lieDeg } of from.needles) {
      const to = nearestAlong(from, lieDeg, junctions);
      if (!to) continue;
      const pair = [from.junctionId, to.junctionId].sort((a, b) => a - b).join("-");
      if (drawn.has(pair)) continue;
      drawn.add(pair);
      features.push({ type: "Feature", properties: {}, geometry: { type: "LineString", coordinates: [[from.lon, from.lat], [to.lon, to.lat]] } });
    }
  }
  return { type: "FeatureCollection", features };
}

function nearestAlong(from: Placed, lieDeg: number, junctions: readonly Placed[]): Placed | null {
  const plane = planeAt(from.lat, from.lon);
  let nearest: Placed | null = null;
  let nearestM = LINK_LONGEST_M;
  for (const to of junctions) {
    const [x, y] = [eastM(plane, to.lon), northM(plane, to.lat)];
    const distanceM = Math.hypot(x, y);
    if (to === from || distanceM >= nearestM) continue;
    const off = Math.abs(((Math.atan2(x, y) / RAD - lieDeg + 540) % 360) - 180);
    if (off <= LINK_HALF_ANGLE_DEG) [nearest, nearestM] = [to, distanceM];
  }
  return nearest;
}

export type Bounds = [west: number, south: number, east: number, north: number];

/** No city is as wide, degrees: what lies farther from its middle is a slip of the pen and must not hide the rest. */
const FARTHEST_DEG = 1.5;

/** Box round the junctions, those left out that lie in another part of the world; null where there are none. */
export function boundsOf(junctions: readonly Pick<Placed, "lat" | "lon">[]): Bounds | null {
  if (junctions.length === 0) return null;
  const [middleLat, middleLon] = [median(junctions.map(({ lat }) => lat)), median(junctions.map(({ lon }) => lon))];
  const near = junctions.filter(({ lat, lon }) => Math.abs(lat - middleLat) <= FARTHEST_DEG && Math.abs(lon - middleLon) <= FARTHEST_DEG);
  const bounds: Bounds = [Infinity, Infinity, -Infinity, -Infinity];
  for (const { lat, lon } of near.length > 0 ? near : junctions) {
    bounds[0] = Math.min(bounds[0], lon);
    bounds[1] = Math.min(bounds[1], lat);
    bounds[2] = Math.max(bounds[2], lon);
    bounds[3] = Math.max(bounds[3], lat);
  }
  return bounds;
}

function median(values: number[]): number {
  return values.sort((a, b) => a - b)[Math.floor(values.length / 2)];
}

export function overlap(a: Bounds, b: Bounds): boolean {
  return a[0] <= b[2] && b[0] <= a[2] && a[1] <= b[3] && b[1] <= a[3];
}
