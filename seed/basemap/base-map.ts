import { latOf, lonOf, pointAlong, lineLengthM, type Point } from "../plane";
import { COAST, DISTRICTS, PARKS, RIVER_NAME, isWater, riverBanks, seaRing } from "../plan/land";
import { smoothLine } from "../plane";
import type { City, CityEdge } from "../network/types";

type Position = [lon: number, lat: number];
interface Feature {
  type: "Feature";
  properties: Record<string, string | number>;
  geometry:
    | { type: "LineString"; coordinates: Position[] }
    | { type: "Polygon"; coordinates: Position[][] }
    | { type: "Point"; coordinates: Position };
}

export interface BaseMap {
  streets: Feature[];
  water: Feature[];
  parks: Feature[];
  labels: Feature[];
}

/** The city as the map draws it. Street classes: ring, arterial, street, oneway, local. */
export function buildBaseMap(city: City): BaseMap {
  return {
    streets: streetLines(city).map(({ edge, line }) => ({
      type: "Feature",
      properties: { name: edge.street, class: edge.class },
      geometry: { type: "LineString", coordinates: thin(line).map(positionOf) },
    })),
    water: [
      polygon({ kind: "river", name: RIVER_NAME }, riverBanks()),
      polygon({ kind: "river", name: "" }, riverFromTheHills()),
      polygon({ kind: "sea", name: "Varn Sound" }, seaRing()),
      { type: "Feature", properties: { kind: "coast", name: "" }, geometry: { type: "LineString", coordinates: smoothLine(COAST, 120).map(positionOf) } },
    ],
    parks: PARKS.map((park) => polygon({ name: park.name }, park.ring)),
    labels: labels(),
  };
}

/** The river above the plan, as broad as where the plan takes it up. */
function riverFromTheHills(): Point[] {
  const banks = riverBanks();
  const [left, right] = [banks[0], banks[banks.length - 1]];
  const centre: Point[] = [[-6200, 1500], [-7600, 3000], [-9800, 4100], [-12600, 4600], [-16500, 6800], [-24000, 9000]];
  const line = smoothLine(centre, 120);
  const shifted = (bank: Point) => line.map(([x, y]): Point => [x + bank[0] - centre[0][0], y + bank[1] - centre[0][1]]);
  return [...shifted(left), ...shifted(right).reverse()];
}

export function featureCollection(features: Feature[]): string {
  return `{"type":"FeatureCollection","features":[\n${features.map((feature) => JSON.stringify(feature)).join(",\n")}\n]}\n`;
}

function positionOf(point: Point): Position {
  return [Number(lonOf(point[0]).toFixed(6)), Number(latOf(point[1]).toFixed(6))];
}

function polygon(properties: Record<string, string>, ring: Point[]): Feature {
  const closed = [...ring, ring[0]];
  return { type: "Feature", properties, geometry: { type: "Polygon", coordinates: [closed.map(positionOf)] } };
}

/** Edges of one street chained to lines as long as possible, so that names and joins read well. */
function streetLines(city: City): { edge: CityEdge; line: Point[] }[] {
  const lines: { edge: CityEdge; from: number; to: number; line: Point[] }[] = [];
  for (const edge of city.edges) {
    const same = lines.filter((other) => other.edge.street === edge.street && other.edge.class === edge.class);
    const before = same.find((other) => other.to === edge.from);
    const after = same.find((other) => other.from === edge.to && other !== before);
    if (before) {
      before.line = [...before.line, ...edge.line.slice(1)];
      before.to = edge.to;
      if (!after) continue;
      before.line = [...before.line, ...after.line.slice(1)];
      before.to = after.to;
      lines.splice(lines.indexOf(after), 1);
    } else if (after) {
      after.line = [...edge.line.slice(0, -1), ...after.line];
      after.from = edge.from;
    } else {
      lines.push({ edge, from: edge.from, to: edge.to, line: edge.line });
    }
  }
  return lines;
}

/** Leaves out vertices that lie within half a metre of the line between their neighbours. */
function thin(line: Point[]): Point[] {
  const kept: Point[] = [line[0]];
  for (let i = 1; i < line.length - 1; i++) {
    const [a, b, p] = [kept[kept.length - 1], line[i + 1], line[i]];
    const lengthM = Math.hypot(b[0] - a[0], b[1] - a[1]) || 1;
    const offM = Math.abs((b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0])) / lengthM;
    if (offM > 0.5) kept.push(p);
  }
  kept.push(line[line.length - 1]);
  return kept;
}

function labels(): Feature[] {
  const point = (kind: string, name: string, at: Point): Feature => ({
    type: "Feature",
    properties: { kind, name },
    geometry: { type: "Point", coordinates: positionOf(at) },
  });
  const middle = (ring: Point[]): Point => [
    ring.reduce((sum, p) => sum + p[0], 0) / ring.length,
    ring.reduce((sum, p) => sum + p[1], 0) / ring.length,
  ];
  const banks = riverBanks();
  const half = banks.slice(0, banks.length / 2);
  const along = lineLengthM(half);
  const riverAt = [0.22, 0.62].map((share) => pointAlong(half, along * share)).map((p): Point => (isWater([p[0], p[1] - 60]) ? [p[0], p[1] - 60] : p));
  return [
    point("city", "Varnmouth", [0, 3500]),
    ...DISTRICTS.map((district) => point("district", district.name, district.centre)),
    ...riverAt.map((at) => point("water", RIVER_NAME, at)),
    point("water", "Varn Sound", [4700, -3700]),
    ...PARKS.map((park) => point("park", park.name, middle(park.ring))),
  ];
}
