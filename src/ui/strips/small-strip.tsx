"use client";

import { useQuery } from "@tanstack/react-query";
import { useEffect, useMemo, useRef } from "react";
import { reachOfDays } from "@/core/strips/reach-of-days";
import { crossingTimes } from "@/core/strips/track-crossings";
import type { StripQuery, WhenQuery } from "@/domain/junction";
import { USUAL_STRIP } from "@/domain/query-address";
import { drawWithFaces } from "./draw-picture";
import { drawSmall, smallHeight } from "./draw-small";
import { paintCanvas } from "./paint-canvas";
import { tracksQuery } from "./queries";
import { buildPicture, includeTurn, windowOfView, type PictureView } from "./strip-picture";
import { useBoxWidth } from "./use-box-width";

/** Cells that stay readable at a glance. */
const CELL_M = 20;
const COLUMNS = 36;

/** A leg's strip as one of several, drawn from the same tracks as the large one. */
export function SmallStrip({ view, when, longestM }: { view: PictureView; when: WhenQuery; longestM: number }) {
  const box = useRef<HTMLDivElement>(null);
  const canvas = useRef<HTMLCanvasElement>(null);
  const { width, ratio } = useBoxWidth(box);
  const height = smallHeight(view.leg.lengthM, longestM);
  const query = useMemo(() => smallQuery(when, view), [when, view]);
  const tracks = useQuery(tracksQuery(view.leg.id, query));
  const set = tracks.data;
  const picture = useMemo(() => {
    if (!set || set.tracks === 0) return null;
    const { fromS, toS } = windowOfView(view);
    const include = includeTurn(set, view.movements, "any");
    return buildPicture({ view, query, set, include, crossingS: crossingTimes(set), reaches: reachOfDays(set, fromS, toS, view.leg.storageM ?? NaN) });
  }, [set, view, query]);

  useEffect(() => {
    if (!picture || width === 0) return;
    return drawWithFaces(() => paintCanvas(canvas.current, width, height, ratio, (ctx) => drawSmall(ctx, width, height, picture)));
  }, [picture, width, height, ratio]);

  return (
    <div ref={box} style={{ height }} className="min-w-0">
      {picture ? (
        <canvas ref={canvas} aria-hidden="true" className="block" style={{ width, height }} />
      ) : (
        <p className="border-b-2 border-ink pt-3 text-sm text-ink-soft" style={{ height: height - 20 }}>
          {tracks.isPending ? "Reading the vehicles' paths…" : tracks.isError ? tracks.error.message : "No vehicle was seen."}
        </p>
      )}
    </div>
  );
}

function smallQuery(when: WhenQuery, view: PictureView): StripQuery {
  const seconds = (view.basis.toMin - view.basis.fromMin) * 60;
  const cellS = Math.min(900, Math.max(60, Math.ceil(seconds / COLUMNS / 60) * 60));
  return { ...USUAL_STRIP, ...when, cellM: CELL_M, cellS };
}
