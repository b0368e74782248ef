"use client";

import { Layer, Source } from "react-map-gl/maplibre";
import type { BaseMap } from "./base-map";
import { MARK_LAYER_ID } from "./mark-layer";
import { GROUND_LAYERS } from "./map-style";

/** Ground of the map, below everything that is measured. */
export function BaseMapLayers({ baseMap }: { baseMap: BaseMap }) {
  return (
    <Source id="ground" type="geojson" data={baseMap.ground}>
      {GROUND_LAYERS.map((layer) => (
        <Layer key={layer.id} {...layer} beforeId={MARK_LAYER_ID} />
      ))}
    </Source>
  );
}
