import { smoothLine, type Point } from "../plane";
import type { Street, StreetClass } from "./streets";

export interface GridLine {
  /** Metres from the grid's origin, across the line. */
  at: number;
  name: string;
  class: StreetClass;
  /** Runs against the grid's axis; matters for one-way streets. */
  isReversed?: boolean;
  /** Ends along the line in grid metres, where the street is longer or shorter than the grid. */
  from?: number;
  to?: number;
}

export interface Grid {
  origin: Point;
  /** Turned clockwise from north. */
  angleDeg: number;
  /** How far the streets swing from straight. */
  bendM: number;
  avenues: GridLine[];
  rows: GridLine[];
}

const OVERSHOOT_M = 40;

/** Streets of a town grid: turned, unevenly spaced and gently bent. */
export function gridStreets(grid: Grid): Street[] {
  const first = (lines: GridLine[]) => lines[0].at - OVERSHOOT_M;
  const last = (lines: GridLine[]) => lines[lines.length - 1].at + OVERSHOOT_M;
  const lineOf = (line: GridLine, from: number, to: number, isAvenue: boolean): Street => {
    const points: Point[] = [];
    const steps = Math.ceil((to - from) / 100);
    for (let i = 0; i <= steps; i++) {
      const along = from + ((to - from) * i) / steps;
      points.push(isAvenue ? place(grid, line.at, along) : place(grid, along, line.at));
    }
    if (line.isReversed) points.reverse();
    return { name: line.name, class: line.class, isClosed: false, line: smoothLine(points, 25) };
  };
  return [
    ...grid.avenues.map((line) => lineOf(line, line.from ?? first(grid.rows), line.to ?? last(grid.rows), true)),
    ...grid.rows.map((line) => lineOf(line, line.from ?? first(grid.avenues), line.to ?? last(grid.avenues), false)),
  ];
}

function place(grid: Grid, u: number, v: number): Point {
  const bentU = u + grid.bendM * Math.sin(v / 310 + 0.7);
  const bentV = v + grid.bendM * Math.sin(u / 370 - 0.4);
  const angle = (grid.angleDeg * Math.PI) / 180;
  return [
    grid.origin[0] + bentU * Math.cos(angle) + bentV * Math.sin(angle),
    grid.origin[1] - bentU * Math.sin(angle) + bentV * Math.cos(angle),
  ];
}
