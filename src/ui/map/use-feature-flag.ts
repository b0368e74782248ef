"use client";

import { useEffect, useRef } from "react";
import type { MapRef } from "react-map-gl/maplibre";

/**
 * Keeps one boolean of the feature states of a source equal to a set of ids. Only the difference to the last set is
 * written, and the source's data keep their identity: nothing is cut into tiles again while a slider moves.
 */
export function useFeatureFlag(map: MapRef | null, source: string, flag: string, ids: ReadonlySet<number>): void {
  const applied = useRef<ReadonlySet<number>>(new Set());
  useEffect(() => {
    if (!map) return;
    for (const id of applied.current) if (!ids.has(id)) map.setFeatureState({ source, id }, { [flag]: false });
    for (const id of ids) if (!applied.current.has(id)) map.setFeatureState({ source, id }, { [flag]: true });
    applied.current = ids;
  }, [map, source, flag, ids]);
}
