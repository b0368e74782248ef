"use client";

import { Layer, Source } from "react-map-gl/maplibre";
import type { BaseMap } from "./base-map";
import {
  BANK_LAYER,
  COAST_LAYER,
  PARK_LAYER,
  PLACE_NAME_LAYER,
  RIVER_LAYER,
  SEA_LAYER,
  STREET_LAYER,
  STREET_NAME_LAYER,
  WATER_NAME_LAYER,
} from "./map-style";

/** Ground of the map, below everything that is measured. */
export function BaseMapLayers({ baseMap }: { baseMap: BaseMap }) {
  return (
    <>
      <Source id="parks" type="geojson" data={baseMap.parks}>
        <Layer {...PARK_LAYER} beforeId="needles" />
      </Source>
      <Source id="water" type="geojson" data={baseMap.water}>
        <Layer {...RIVER_LAYER} beforeId="needles" />
        <Layer {...BANK_LAYER} beforeId="needles" />
        <Layer {...SEA_LAYER} beforeId="needles" />
        <Layer {...COAST_LAYER} beforeId="needles" />
      </Source>
      <Source id="streets" type="geojson" data={baseMap.streets}>
        <Layer {...STREET_LAYER} beforeId="needles" />
        <Layer {...STREET_NAME_LAYER} beforeId="needles" />
      </Source>
      <Source id="labels" type="geojson" data={baseMap.labels}>
        <Layer {...PLACE_NAME_LAYER} beforeId="needles" />
        <Layer {...WATER_NAME_LAYER} beforeId="needles" />
      </Source>
    </>
  );
}
