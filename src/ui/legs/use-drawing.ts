"use client";

import { useState } from "react";
import type { Point } from "@/ui/junctions/plan-geometry";
import { rounded } from "./leg-shape";

/** What is being drawn: one line for a new leg, two for a leg that is split. */
export type Drawing = { kind: "add" } | { kind: "split"; legId: number };

export interface DrawingControls {
  drawing: Drawing | null;
  lines: Point[][];
  /** The line that the next point goes to. */
  active: number;
  begin(drawing: Drawing): void;
  end(): void;
  choose(line: number): void;
  addPoint(point: Point): void;
  dropPoint(): void;
}

/** Lines drawn on the plan, from the stop line upstream. */
export function useDrawing(): DrawingControls {
  const [drawing, setDrawing] = useState<Drawing | null>(null);
  const [lines, setLines] = useState<Point[][]>([]);
  const [active, setActive] = useState(0);
  const change = (of: (line: Point[]) => Point[]) => setLines((before) => before.map((line, i) => (i === active ? of(line) : line)));
  return {
    drawing,
    lines,
    active,
    begin(next) {
      setDrawing(next);
      setLines(next.kind === "add" ? [[]] : [[], []]);
      setActive(0);
    },
    end: () => setDrawing(null),
    choose: setActive,
    addPoint: (point) => change((line) => [...line, rounded(point)]),
    dropPoint: () => change((line) => line.slice(0, -1)),
  };
}
