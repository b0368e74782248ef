"use client";

import { useLayoutEffect, useMemo, useRef, useState, type KeyboardEvent, type PointerEvent } from "react";
import { cellAt, cellCentre } from "@/core/strips/strip";
import { StripOverlay } from "./strip-overlay";
import { drawPicture, drawWithFaces } from "./draw-picture";
import type { StripWords } from "./draw-lines";
import { firstCell, moveCursor, readOut, readOutText, type CursorMove, type ReadOutWords } from "./strip-cursor";
import { paintCanvas } from "./paint-canvas";
import { layoutStrip, scalesOf, stripHeight } from "./strip-layout";
import type { StripPicture } from "./strip-picture";
import { useBoxWidth } from "./use-box-width";

const MOVES: Record<string, CursorMove> = {
  ArrowLeft: "earlier",
  ArrowRight: "later",
  ArrowUp: "farther",
  ArrowDown: "nearer",
  Home: "first",
  End: "last",
};
const BIG_STEP = 10;

/** Strip and delay on one canvas; a cursor that follows the pointer or the arrow keys reads a cell out. */
export function StripCanvas({ picture, words, reads, label }: { picture: StripPicture; words: StripWords; reads: ReadOutWords; label: string }) {
  const box = useRef<HTMLDivElement>(null);
  const canvas = useRef<HTMLCanvasElement>(null);
  const { width, windowHeight, ratio } = useBoxWidth(box);
  const layout = useMemo(() => layoutStrip(width, stripHeight(windowHeight)), [width, windowHeight]);
  // A place, not a cell: it stays where it is when the cells are cut anew.
  const [cursor, setCursor] = useState<{ tS: number; sM: number } | null>(null);
  const [spoken, setSpoken] = useState("");

  // Before the browser paints: words and strip change in one frame.
  useLayoutEffect(() => {
    if (width === 0) return;
    return drawWithFaces(() => paintCanvas(canvas.current, layout.width, layout.height, ratio, (ctx) => drawPicture(ctx, layout, picture, words)));
  }, [picture, words, layout, width, ratio]);

  const { spec } = picture.strip;
  const under = cursor === null ? -1 : cellAt(spec, cursor.tS, cursor.sM);
  const known = under >= 0 ? under : null;

  function onPointer(event: PointerEvent<HTMLDivElement>) {
    const frame = event.currentTarget.getBoundingClientRect();
    const [x, y] = [event.clientX - frame.left, event.clientY - frame.top];
    const { plot, delay } = layout;
    const isAside = x < plot.left || x > plot.left + plot.width || y < plot.top || y > delay.top + delay.height;
    if (isAside) return setCursor(null);
    const scales = scalesOf(plot, picture.window);
    const s = y <= plot.top + plot.height ? scales.sOf(y) : picture.window.bottomM;
    setCursor({ tS: scales.tOf(x), sM: Math.min(s, picture.window.topM - 0.01) });
  }

  function onKey(event: KeyboardEvent) {
    if (event.key === "Escape") return setCursor(null);
    const move = MOVES[event.key];
    if (!move || event.altKey || event.ctrlKey || event.metaKey) return;
    event.preventDefault();
    const next = known === null ? firstCell(picture) : moveCursor(picture, known, move, event.shiftKey ? BIG_STEP : 1);
    setCursor(cellCentre(spec, next));
    setSpoken(readOutText(readOut(picture, next, reads)));
  }

  return (
    <div
      ref={box}
      role="application"
      aria-roledescription="strip"
      aria-label={label}
      tabIndex={0}
      className="relative min-w-0 touch-pan-y outline-offset-[-2px]"
      style={{ height: layout.height }}
      onPointerMove={onPointer}
      onPointerDown={onPointer}
      onPointerLeave={(event) => event.pointerType === "mouse" && setCursor(null)}
      onKeyDown={onKey}
      data-testid="strip"
    >
      <canvas ref={canvas} aria-hidden="true" className="block" style={{ width: layout.width, height: layout.height }} />
      {known !== null && width > 0 ? <StripOverlay picture={picture} layout={layout} cell={known} text={readOut(picture, known, reads)} /> : null}
      <p className="sr-only" aria-live="polite" aria-atomic="true">
        {spoken}
      </p>
    </div>
  );
}
