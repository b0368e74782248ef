"use client";

import { useMemo } from "react";
import { reachOfDays } from "@/core/strips/reach-of-days";
import { crossingTimes } from "@/core/strips/track-crossings";
import type { TrackSet } from "@/core/strips/track-set";
import type { LegStripView, StripQuery } from "@/domain/junction";
import { dayFacts, daysSeen, typicalFacts, type StripFacts } from "./strip-facts";
import { buildPicture, includeTurn, windowOfView, type StripPicture } from "./strip-picture";

/** A picture together with what it was drawn from: they belong together even while the next choice is read. */
export interface DrawnStrip {
  view: LegStripView;
  query: StripQuery;
  picture: StripPicture;
  facts: StripFacts;
}

/** Picture and figures of the tracks; what a change of cells or wave does not touch is kept. */
export function useStripPicture(view: LegStripView | undefined, set: TrackSet | undefined, query: StripQuery): DrawnStrip | null {
  const crossingS = useMemo(() => set && crossingTimes(set), [set]);
  const reaches = useMemo(() => {
    if (!set || !view) return undefined;
    const { fromS, toS } = windowOfView(view);
    return reachOfDays(set, fromS, toS, view.leg.storageM ?? NaN);
  }, [set, view]);
  const include = useMemo(() => set && view && includeTurn(set, view.movements, query.turn), [set, view, query.turn]);
  return useMemo(() => {
    if (!view || !set || !include || !crossingS || !reaches) return null;
    const picture = buildPicture({ view, query, set, include, crossingS, reaches });
    const facts = query.day === undefined ? typicalFacts(view, query.turn, daysSeen(picture, crossingS)) : dayFacts(view, picture, reaches, crossingS);
    return { view, query, picture, facts };
  }, [view, query, set, include, crossingS, reaches]);
}
