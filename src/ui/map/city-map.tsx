"use client";

import { useQuery } from "@tanstack/react-query";
import { setWorkerUrl, type Map as LibraryMap } from "maplibre-gl";
import "maplibre-gl/dist/maplibre-gl.css";
import { useEffect, useLayoutEffect, useMemo, useRef, useState, useSyncExternalStore } from "react";
import { Layer, Map, Source, type MapMouseEvent, type MapRef } from "react-map-gl/maplibre";
import type { RankedJunction } from "@/domain/screen";
import type { Units } from "@/ui/format";
import { Failed } from "@/ui/primitives/states";
import { BaseMapLayers } from "./base-map-layers";
import { baseMapFor, baseMapQuery } from "./base-map";
import type { HoverStore } from "./hover-store";
import { MapButtons } from "./map-buttons";
import { MapLegend } from "./map-legend";
import { EMPTY_STYLE, LINK_LAYER, PAPER_COLOR } from "./map-style";
import { createMarkLayer, MARK_LAYER_ID } from "./mark-layer";
import { flagsOf, marksOf, nearestMark } from "./marks";
import { boundsOf, linkFeatures } from "./needles";
import { HoveredMark, SelectedMark } from "./selected-mark";
import { worldAt, worldPxAt } from "./world";

setWorkerUrl("/maplibre-gl-worker.mjs");

export interface CityMapProps {
  /** All junctions of the city; the same array as long as the figures are the same. */
  rows: RankedJunction[];
  shownIds: ReadonlySet<number>;
  selected: number | null;
  hover: HoverStore;
  units: Units;
  locale: string;
  /** Said beside the selected junction, under its name. */
  noteOf: (row: RankedJunction) => string | null;
  onSelect: (junctionId: number | null) => void;
}

const PICK_PX = 14;
const WHOLE_CITY_PADDING = { top: 24, left: 24, right: 24, bottom: 48 };

export default function CityMap({ rows, shownIds, selected, hover, units, locale, noteOf, onSelect }: CityMapProps) {
  const [map, setMap] = useState<MapRef | null>(null);
  const [hasFailed, setFailed] = useState(false);
  const [metresPerPx, setMetresPerPx] = useState(20);
  const [centreLon, setCentreLon] = useState(0);
  const { data: anyBaseMap, isPending } = useQuery(baseMapQuery());

  const bounds = useMemo(() => boundsOf(rows), [rows]);
  const baseMap = baseMapFor(anyBaseMap, bounds);
  const [markLayer] = useState(createMarkLayer);
  const marks = useMemo(() => marksOf(rows), [rows]);
  const flags = useMemo(() => flagsOf(marks, shownIds, selected), [marks, shownIds, selected]);
  useLayoutEffect(() => markLayer.setMarks(marks), [markLayer, marks]);
  useLayoutEffect(() => markLayer.setFlags(flags), [markLayer, flags]);
  const hasLinks = !isPending && !baseMap;
  const links = useMemo(() => (hasLinks ? linkFeatures(rows) : null), [hasLinks, rows]);
  const byId = useMemo(() => new globalThis.Map(rows.map((row) => [row.junctionId, row])), [rows]);

  const hovered = byId.get(useSyncExternalStore(hover.subscribe, hover.get, () => null) ?? -1);
  const chosen = byId.get(selected ?? -1);
  useFollowSelection(map, chosen);

  const junctionAt = ({ lngLat }: MapMouseEvent): number | null =>
    map ? nearestMark(marks, flags.dots, worldAt(lngLat.lat, lngLat.lng), PICK_PX / worldPxAt(map.getZoom())) : null;
  // While the map is panned neither changes, and nothing beside it is drawn anew.
  const onMove = () => {
    if (map) setMetresPerPx(Number(groundMetresPerPx(map).toPrecision(3)));
  };
  const onIdle = () => {
    onMove();
    if (map) setCentreLon(map.getCenter().lng);
  };

  if (!bounds) return null;
  if (hasFailed) return <Failed title="The map could not be drawn." message="It needs WebGL, which this browser does not offer or has switched off. The list holds the same figures." />;
  return (
    <div className="@container absolute inset-0" role="group" aria-label="Map of the junctions. The list holds the same figures.">
      <Map
        initialViewState={{ bounds, fitBoundsOptions: { padding: WHOLE_CITY_PADDING } }}
        mapStyle={EMPTY_STYLE}
        style={{ background: PAPER_COLOR }}
        attributionControl={false}
        dragRotate={false}
        pitchWithRotate={false}
        touchPitch={false}
        maxZoom={18}
        minZoom={8}
        fadeDuration={0}
        onLoad={(event) => prepare(event.target)}
        onError={() => setFailed(map === null)}
        ref={setMap}
        onIdle={onIdle}
        onMove={onMove}
        onClick={(event) => onSelect(junctionAt(event))}
        onMouseMove={(event) => hover.set(junctionAt(event))}
        onMouseOut={() => hover.set(null)}
        cursor={hovered ? "pointer" : "grab"}
      >
        <Layer {...markLayer.layer} />
        {baseMap ? <BaseMapLayers baseMap={baseMap} /> : null}
        {links ? (
          <Source id="links" type="geojson" data={links}>
            <Layer {...LINK_LAYER} beforeId={MARK_LAYER_ID} />
          </Source>
        ) : null}
        {chosen ? <SelectedMark lat={chosen.lat} lon={chosen.lon} name={chosen.name} note={noteOf(chosen)} side={chosen.lon > centreLon ? "left" : "right"} /> : null}
        {hovered && hovered !== chosen ? <HoveredMark lat={hovered.lat} lon={hovered.lon} name={hovered.name} /> : null}
      </Map>
      <MapButtons onZoom={(by) => map?.zoomTo(map.getZoom() + by)} onWhole={() => map?.fitBounds(bounds, { padding: WHOLE_CITY_PADDING })} />
      <MapLegend metresPerPx={metresPerPx} units={units} locale={locale} />
    </div>
  );
}

/** A flat map with north up, that says what its keys do. */
function prepare(map: LibraryMap): void {
  map.touchZoomRotate.disableRotation();
  map.keyboard.disableRotation();
  map.getCanvas().setAttribute("aria-label", "Map; arrow keys move it, plus and minus zoom");
  // The library lays a sky over the whole window in every frame; without a graphics card that is half the work of a frame.
  map.painter.drawFunctions = { ...map.painter.drawFunctions, sky: () => undefined };
}

/** Equator of WGS 84 over the 512-pixel world of zoom 0. */
function groundMetresPerPx(map: MapRef): number {
  return (40_075_017 * Math.cos((map.getCenter().lat * Math.PI) / 180)) / (512 * 2 ** map.getZoom());
}

/** Moves the map only when the selected junction is off it or near its edge; never changes the zoom. */
function useFollowSelection(map: MapRef | null, chosen: RankedJunction | undefined): void {
  const last = useRef<number | null>(null);
  useEffect(() => {
    if (!map || !chosen || last.current === chosen.junctionId) return;
    last.current = chosen.junctionId;
    const at = map.project([chosen.lon, chosen.lat]);
    const { clientWidth, clientHeight } = map.getContainer();
    const isInside = at.x > 50 && at.y > 50 && at.x < clientWidth - 50 && at.y < clientHeight - 90;
    if (!isInside) map.easeTo({ center: [chosen.lon, chosen.lat], duration: 400 });
  }, [map, chosen]);
}
