"use client";

import { useEffect, useRef } from "react";
import type { MapRef } from "react-map-gl/maplibre";

/**
 * Keeps one boolean of the feature states of a source equal to a set of ids. Only the difference to the last set is
 * written, and the source's data keep their identity: nothing is cut into tiles again while a slider moves.
 * `map` is null until its style and sources are loaded: a map refuses states before that.
 */
export function useFeatureFlag(map: MapRef | null, source: string, flag: string, ids: ReadonlySet<number>): void {
  const applied = useRef<{ map: MapRef | null; ids: ReadonlySet<number> }>({ map: null, ids: new Set() });
  useEffect(() => {
    if (!map) return;
    const before = applied.current.map === map ? applied.current.ids : new Set<number>();
    for (const id of before) if (!ids.has(id)) map.setFeatureState({ source, id }, { [flag]: false });
    for (const id of ids) if (!before.has(id)) map.setFeatureState({ source, id }, { [flag]: true });
    applied.current = { map, ids };
  }, [map, source, flag, ids]);
}
