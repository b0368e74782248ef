"use client";

import { useEffect, useRef, useState, type RefObject } from "react";

export interface RowWindow {
  /** First and one past the last row to draw. */
  start: number;
  end: number;
  /** Height of one row, measured. */
  rowPx: number;
}

const CHUNK = 8;
const BEYOND = 12;
const FIRST_WINDOW: RowWindow = { start: 0, end: 40, rowPx: 48 };

/** Rows that a view from `topPx` to `bottomPx` of the list needs, with some beyond both ends, in whole chunks. */
export function rowsInView(topPx: number, bottomPx: number, rowPx: number, count: number): { start: number; end: number } {
  const first = Math.floor(topPx / rowPx) - BEYOND;
  const last = Math.ceil(bottomPx / rowPx) + BEYOND;
  const start = Math.max(0, Math.min(count, Math.floor(first / CHUNK) * CHUNK));
  return { start, end: Math.max(start, Math.min(count, Math.ceil(last / CHUNK) * CHUNK)) };
}

/**
 * Which rows of a long list to draw. Works whether the list scrolls in its panel or with the page: it asks where the
 * list's box is. All rows but the opened one are equally high; the opened one is seldom out of the margin.
 */
export function useRowWindow(list: RefObject<HTMLElement | null>, count: number): RowWindow {
  const [view, setView] = useState(FIRST_WINDOW);
  const frame = useRef(0);

  useEffect(() => {
    const measure = () => {
      frame.current = 0;
      const box = list.current?.getBoundingClientRect();
      if (!box) return;
      const rowPx = list.current?.querySelector("[data-row]")?.getBoundingClientRect().height || FIRST_WINDOW.rowPx;
      const next = rowsInView(-box.top, window.innerHeight - box.top, rowPx, count);
      setView((now) => (now.start === next.start && now.end === next.end && now.rowPx === rowPx ? now : { ...next, rowPx }));
    };
    const onMove = () => {
      if (frame.current === 0) frame.current = requestAnimationFrame(measure);
    };
    measure();
    document.addEventListener("scroll", onMove, { capture: true, passive: true });
    window.addEventListener("resize", onMove);
    return () => {
      cancelAnimationFrame(frame.current);
      frame.current = 0;
      document.removeEventListener("scroll", onMove, { capture: true });
      window.removeEventListener("resize", onMove);
    };
  }, [list, count]);

  return { start: Math.min(view.start, count), end: Math.min(Math.max(view.end, 0), count), rowPx: view.rowPx };
}
