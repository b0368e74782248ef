"use client";

import { useQuery } from "@tanstack/react-query";
import { setWorkerUrl } from "maplibre-gl";
import "maplibre-gl/dist/maplibre-gl.css";
import { useCallback, useEffect, useMemo, useRef, useState, useSyncExternalStore } from "react";
import { Layer, Map, Source, type MapMouseEvent, type MapRef } from "react-map-gl/maplibre";
import type { RankedJunction } from "@/domain/screen";
import type { Units } from "@/ui/format";
import { Failed } from "@/ui/primitives/states";
import { BaseMapLayers } from "./base-map-layers";
import { baseMapFor, baseMapQuery } from "./base-map";
import type { HoverStore } from "./hover-store";
import { MapButtons } from "./map-buttons";
import { MapLegend } from "./map-legend";
import { DOT_LAYER, LINK_LAYER, NEEDLE_LAYER, PAPER_STYLE } from "./map-style";
import { boundsOf, dotFeatures, linkFeatures, needleFeatures } from "./needles";
import { HoveredMark, SelectedMark } from "./selected-mark";
import { useFeatureFlag } from "./use-feature-flag";

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
const NOBODY: ReadonlySet<number> = new Set();

export default function CityMap({ rows, shownIds, selected, hover, units, locale, noteOf, onSelect }: CityMapProps) {
  const [map, setMap] = useState<MapRef | null>(null);
  const [isLoaded, setLoaded] = useState(false);
  const [hasFailed, setFailed] = useState(false);
  const [view, setView] = useState({ metresPerPx: 20, centreLon: 0 });
  const { data: anyBaseMap, isPending } = useQuery(baseMapQuery());

  const bounds = useMemo(() => boundsOf(rows), [rows]);
  const baseMap = baseMapFor(anyBaseMap, bounds);
  const needles = useMemo(() => needleFeatures(rows), [rows]);
  const dots = useMemo(() => dotFeatures(rows), [rows]);
  const hasLinks = !isPending && !baseMap;
  const links = useMemo(() => (hasLinks ? linkFeatures(rows) : null), [hasLinks, rows]);
  const byId = useMemo(() => new globalThis.Map(rows.map((row) => [row.junctionId, row])), [rows]);

  const hovered = byId.get(useSyncExternalStore(hover.subscribe, hover.get, () => null) ?? -1);
  const chosen = byId.get(selected ?? -1);
  const legsOf = useCallback((ids: ReadonlySet<number>) => new Set([...ids].flatMap((id) => byId.get(id)?.needles.map((needle) => needle.legId) ?? [])), [byId]);
  const strong = useMemo(() => (chosen ? new Set([chosen.junctionId]) : NOBODY), [chosen]);
  const loaded = isLoaded ? map : null;
  useFeatureFlag(loaded, "dots", "shown", shownIds);
  useFeatureFlag(loaded, "needles", "shown", useMemo(() => legsOf(shownIds), [legsOf, shownIds]));
  useFeatureFlag(loaded, "needles", "strong", useMemo(() => legsOf(strong), [legsOf, strong]));
  useFollowSelection(map, chosen);

  const junctionAt = (event: MapMouseEvent): number | null => (map ? nearestJunction(map, event, byId, shownIds) : null);
  const onMove = () => {
    if (map) setView({ metresPerPx: groundMetresPerPx(map), centreLon: map.getCenter().lng });
  };

  if (!bounds) return null;
  if (hasFailed) return <Failed title="The map could not be drawn." message="It needs WebGL, which this browser does not offer or has switched off. The list holds the same figures." />;
  return (
    <div className="absolute inset-0" role="group" aria-label="Map of the junctions. The list holds the same figures.">
      <Map
        initialViewState={{ bounds, fitBoundsOptions: { padding: WHOLE_CITY_PADDING } }}
        mapStyle={PAPER_STYLE}
        attributionControl={false}
        dragRotate={false}
        pitchWithRotate={false}
        touchPitch={false}
        maxZoom={18}
        minZoom={8}
        fadeDuration={0}
        onLoad={(event) => {
          setLoaded(true);
          event.target.touchZoomRotate.disableRotation();
          event.target.keyboard.disableRotation();
          event.target.getCanvas().setAttribute("aria-label", "Map; arrow keys move it, plus and minus zoom");
        }}
        onError={() => setFailed(map === null)}
        ref={setMap}
        onIdle={onMove}
        onMove={onMove}
        onClick={(event) => onSelect(junctionAt(event))}
        onMouseMove={(event) => hover.set(junctionAt(event))}
        onMouseOut={() => hover.set(null)}
        cursor={hovered ? "pointer" : "grab"}
      >
        <Source id="needles" type="geojson" data={needles} promoteId="legId">
          <Layer {...NEEDLE_LAYER} />
        </Source>
        <Source id="dots" type="geojson" data={dots} promoteId="junctionId">
          <Layer {...DOT_LAYER} />
        </Source>
        {baseMap ? <BaseMapLayers baseMap={baseMap} /> : null}
        {links ? (
          <Source id="links" type="geojson" data={links}>
            <Layer {...LINK_LAYER} beforeId="needles" />
          </Source>
        ) : null}
        {chosen ? <SelectedMark lat={chosen.lat} lon={chosen.lon} name={chosen.name} note={noteOf(chosen)} side={chosen.lon > view.centreLon ? "left" : "right"} /> : null}
        {hovered && hovered !== chosen ? <HoveredMark lat={hovered.lat} lon={hovered.lon} name={hovered.name} /> : null}
      </Map>
      <MapButtons onZoom={(by) => map?.zoomTo(map.getZoom() + by)} onWhole={() => map?.fitBounds(bounds, { padding: WHOLE_CITY_PADDING })} />
      <MapLegend metresPerPx={view.metresPerPx} units={units} locale={locale} />
    </div>
  );
}

/** Equator of WGS 84 over the 512-pixel world of zoom 0. */
function groundMetresPerPx(map: MapRef): number {
  return (40_075_017 * Math.cos((map.getCenter().lat * Math.PI) / 180)) / (512 * 2 ** map.getZoom());
}

/** Of junctions within reach of the pointer the nearest, those that pass the filters first. */
function nearestJunction(map: MapRef, { point }: MapMouseEvent, byId: globalThis.Map<number, RankedJunction>, shownIds: ReadonlySet<number>): number | null {
  if (!map.getLayer("dots")) return null;
  const box: [[number, number], [number, number]] = [
    [point.x - PICK_PX, point.y - PICK_PX],
    [point.x + PICK_PX, point.y + PICK_PX],
  ];
  let nearest: number | null = null;
  let nearestPx = Infinity;
  for (const feature of map.queryRenderedFeatures(box, { layers: ["dots"] })) {
    const row = byId.get(Number(feature.properties.junctionId));
    if (!row) continue;
    const at = map.project([row.lon, row.lat]);
    const distancePx = Math.hypot(at.x - point.x, at.y - point.y) + (shownIds.has(row.junctionId) ? 0 : PICK_PX);
    if (distancePx < nearestPx) [nearest, nearestPx] = [row.junctionId, distancePx];
  }
  return nearest;
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
