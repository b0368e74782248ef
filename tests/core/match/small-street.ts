import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import { draftExit, draftLeg } from "@/core/legs/draft";
import { createFrame } from "@/core/legs/frame";
import { listMovements } from "@/core/legs/movements";
import type { Network } from "@/core/types";

export const ORIGIN = planeAt(45.6, -38.3);
export const at = (x: number, y: number): { lat: number; lon: number } => ({ lat: latAt(ORIGIN, y), lon: lonAt(ORIGIN, x) });
const line = (...xy: number[]): Float64Array => Float64Array.from(xy);

/** Three crossings 200 m apart in a row from west to east and one eastbound street through them, its boxes 14 m deep. */
export function street(): Network {
  const junctions = [{ id: "A", ...at(0, 0) }, { id: "B", ...at(200, 0) }, { id: "C", ...at(400, 0) }];
  const frame = createFrame(junctions, 1000);
  const legs = junctions.map((_, j) => draftLeg(frame, j, line(-14, 0, -186, 0), 50));
  const exits = junctions.map((_, j) => draftExit(frame, j, line(14, 0, 186, 0), 50));
  legs[1] = { ...legs[1], upstreamExit: 0 };
  legs[2] = { ...legs[2], upstreamExit: 1 };
  const base = { junctions, legs, exits, driveSide: "right" as const };
  return { ...base, movements: listMovements(base) };
}
