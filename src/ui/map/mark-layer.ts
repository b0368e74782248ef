import type { CustomLayerInterface, Map as LibraryMap } from "maplibre-gl";
import { COLORS, NO_DATA_COLOR } from "@/ui/scales";
import { DOT_FRAGMENT, DOT_VERTEX, NEEDLE_FRAGMENT, NEEDLE_VERTEX } from "./mark-shaders";
import { fromOrigin, NEEDLE_WORDS, STRONG_PX, type Flags, type Marks } from "./marks";
import { makeDrawing, type Attribute, type Drawing } from "./webgl-drawing";
import { worldAt, worldPxAt } from "./world";

export const MARK_LAYER_ID = "marks";

/** Sizes by zoom, linear in between and level beyond the ends. */
const WIDTH_SCALE: Stops = [[11, 1], [14, 1.7], [17, 2.6]];
const SHOWN_RADIUS_PX: Stops = [[11, 1.1], [13, 2.2], [15, 3.6], [17, 6]];
const OTHER_RADIUS_PX: Stops = [[11, 1], [13, 1.6], [15, 2.6], [17, 4.5]];
const RIM_PX: Stops = [[11, 0.7], [14, 1.4]];
const OTHER_RIM_COLOR = "#A9A393";

type Stops = readonly (readonly [zoom: number, value: number])[];

const NEEDLE_ATTRIBUTES: readonly Attribute[] = [
  { name: "a_start", size: 2, word: 0 },
  { name: "a_along", size: 2, word: 2 },
  { name: "a_widthPx", size: 1, word: 4 },
  { name: "a_color", size: 4, word: 5, isBytes: true },
];
const DOT_ATTRIBUTES: readonly Attribute[] = [{ name: "a_at", size: 2, word: 0 }];

export interface MarkLayer {
  layer: CustomLayerInterface;
  /** Other figures: new needles. */
  setMarks(marks: Marks): void;
  /** Other filters or another selection: a byte for each mark. */
  setFlags(flags: Flags): void;
}

/**
 * Needles and dots of all junctions, drawn by two calls from the page's own buffers. The map library would cut them into
 * tiles in its worker whenever a figure changes, and work out every corner of every line in every frame.
 */
export function createMarkLayer(): MarkLayer {
  let map: LibraryMap | null = null;
  let marks: Marks | null = null;
  let flags: Flags = { dots: new Uint8Array(), needles: new Uint8Array() };
  let drawings: { needles: Drawing; dots: Drawing } | null = null;
  let isStale = { marks: true, flags: true };

  const upload = ({ needles, dots }: { needles: Drawing; dots: Drawing }, { needles: records, dots: places }: Marks) => {
    if (isStale.marks) {
      needles.fill(records);
      dots.fill(places);
    }
    if (isStale.flags) {
      needles.flag(flags.needles);
      dots.flag(flags.dots);
    }
    isStale = { marks: false, flags: false };
  };

  const layer: CustomLayerInterface = {
    id: MARK_LAYER_ID,
    type: "custom",
    renderingMode: "2d",
    onAdd(to) {
      map = to;
    },
    onRemove() {
      drawings?.needles.remove();
      drawings?.dots.remove();
      map = drawings = null;
      isStale = { marks: true, flags: true };
    },
    render(gl) {
      if (!map || !marks) return;
      // Here and not before: outside of its frames the library relies on what it has bound.
      drawings ??= {
        needles: makeDrawing(gl, NEEDLE_VERTEX, NEEDLE_FRAGMENT, NEEDLE_ATTRIBUTES, NEEDLE_WORDS),
        dots: makeDrawing(gl, DOT_VERTEX, DOT_FRAGMENT, DOT_ATTRIBUTES, 2),
      };
      upload(drawings, marks);
      gl.disable(gl.DEPTH_TEST);
      const view = viewOf(map, marks);
      drawings.needles.draw({ ...view, ...needleSizes(map.getZoom()) });
      drawings.dots.draw({ ...view, ...dotLooks(map.getZoom()) });
    },
  };
  return {
    layer,
    setMarks(next) {
      marks = next;
      isStale.marks = true;
      map?.triggerRepaint();
    },
    setFlags(next) {
      flags = next;
      isStale.flags = true;
      map?.triggerRepaint();
    },
  };
}

function viewOf(map: LibraryMap, { origin }: Marks) {
  const { lat, lng } = map.getCenter();
  const { clientWidth, clientHeight } = map.getContainer();
  return {
    u_centre: fromOrigin(origin, worldAt(lat, lng)),
    u_worldPx: [worldPxAt(map.getZoom())],
    u_sizePx: [clientWidth, clientHeight],
    u_ratio: [map.getPixelRatio()],
  };
}

function needleSizes(zoom: number) {
  return { u_widthScale: [between(WIDTH_SCALE, zoom)], u_strongPx: [STRONG_PX] };
}

function dotLooks(zoom: number) {
  return {
    u_radiusPx: [between(SHOWN_RADIUS_PX, zoom), between(OTHER_RADIUS_PX, zoom)],
    u_rimPx: [between(RIM_PX, zoom)],
    "u_fills[0]": [...channelsOf(COLORS.sheet), ...channelsOf(NO_DATA_COLOR)],
    "u_rims[0]": [...channelsOf(COLORS.ink), ...channelsOf(OTHER_RIM_COLOR)],
  };
}

export function between(stops: Stops, zoom: number): number {
  const next = stops.findIndex(([from]) => from > zoom);
  if (next === 0) return stops[0][1];
  if (next === -1) return stops[stops.length - 1][1];
  const [[from, low], [to, high]] = [stops[next - 1], stops[next]];
  return low + ((high - low) * (zoom - from)) / (to - from);
}

function channelsOf(color: string): number[] {
  return [...[1, 3, 5].map((at) => parseInt(color.slice(at, at + 2), 16) / 255), 1];
}
