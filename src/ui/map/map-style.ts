import type { LayerProps } from "react-map-gl/maplibre";
import type { StyleSpecification } from "maplibre-gl";
import { COLORS, DELAY_SCALE, NO_DATA_COLOR } from "@/ui/scales";

/** Bare paper: everything on it comes from the city's own files. No glyphs address: labels are set in the page's fonts. */
export const PAPER_STYLE: StyleSpecification = {
  version: 8,
  sources: {},
  layers: [{ id: "paper", type: "background", paint: { "background-color": "#FBF9F2" } }],
};

const WATER = "#D9E3E6";
const SHORE = "#B4C6CC";
const PARK = "#E8EBD9";
const STREET = "#E4DAC6";

/** Metres on the ground to pixels would hide small streets: widths grow with the zoom by hand. */
const width = (atCity: number, atStreet: number): unknown => ["interpolate", ["exponential", 1.6], ["zoom"], 11, atCity, 17, atStreet];

export const PARK_LAYER = { id: "parks", type: "fill", paint: { "fill-color": PARK } } as LayerProps;
const isKind = (kind: string) => ["==", ["get", "kind"], kind];
export const RIVER_LAYER = { id: "river", type: "fill", filter: isKind("river"), paint: { "fill-color": WATER } } as LayerProps;
export const BANK_LAYER = { id: "banks", type: "line", filter: isKind("river"), paint: { "line-color": SHORE, "line-width": 1 } } as LayerProps;
/** Above the banks: where a river meets the sea its outline ends. */
export const SEA_LAYER = { id: "sea", type: "fill", filter: isKind("sea"), paint: { "fill-color": WATER } } as LayerProps;
export const COAST_LAYER = { id: "coast", type: "line", filter: isKind("coast"), paint: { "line-color": SHORE, "line-width": 1 } } as LayerProps;

export const STREET_LAYER = {
  id: "streets",
  type: "line",
  layout: { "line-cap": "round", "line-join": "round", "line-sort-key": ["match", ["get", "class"], "local", 0, "street", 1, 2] },
  paint: {
    "line-color": ["match", ["get", "class"], "local", "#EDE6D8", STREET],
    "line-width": [
      "interpolate",
      ["exponential", 1.6],
      ["zoom"],
      11,
      ["match", ["get", "class"], "local", 0.6, "street", 1.4, "oneway", 1.6, 2.6],
      17,
      ["match", ["get", "class"], "local", 8, "street", 16, "oneway", 16, 26],
    ],
  },
} as LayerProps;

export const LINK_LAYER = {
  id: "links",
  type: "line",
  layout: { "line-cap": "round" },
  paint: { "line-color": STREET, "line-width": width(1.6, 14) },
} as LayerProps;

const HALO = { "text-halo-color": "#FBF9F2", "text-halo-width": 1.4 };

export const STREET_NAME_LAYER = {
  id: "street-names",
  type: "symbol",
  minzoom: 14,
  layout: {
    "symbol-placement": "line",
    "text-field": ["get", "name"],
    "text-font": ["Barlow Semi Condensed"],
    "text-size": 12.5,
    "symbol-spacing": 420,
    "text-padding": 6,
  },
  paint: { "text-color": "#6D6455", ...HALO },
} as LayerProps;

export const PLACE_NAME_LAYER = {
  id: "place-names",
  type: "symbol",
  filter: ["in", ["get", "kind"], ["literal", ["district", "park"]]],
  layout: {
    "text-field": ["get", "name"],
    "text-font": ["Barlow Semi Condensed"],
    "text-size": ["interpolate", ["linear"], ["zoom"], 11.5, 11, 15, 15],
    "text-letter-spacing": 0.06,
    "text-max-width": 7,
    "text-padding": 4,
  },
  paint: { "text-color": ["match", ["get", "kind"], "park", "#5F6F4A", "#7A7060"], ...HALO, "text-opacity": ["interpolate", ["linear"], ["zoom"], 15.5, 1, 16.5, 0] },
} as LayerProps;

export const WATER_NAME_LAYER = {
  id: "water-names",
  type: "symbol",
  filter: ["==", ["get", "kind"], "water"],
  layout: { "text-field": ["get", "name"], "text-font": ["Barlow Italic"], "text-size": 14 },
  paint: { "text-color": "#587782", "text-halo-color": WATER, "text-halo-width": 1.2 },
} as LayerProps;

const shown = (yes: unknown, no: unknown): unknown => ["case", ["boolean", ["feature-state", "shown"], false], yes, no];
const strong = (yes: unknown, no: unknown): unknown => ["case", ["boolean", ["feature-state", "strong"], false], yes, no];

/** Dark needles are broader as well: far out they are what the eye has to find. Pixels at the given scale. */
const byDelay = (scale: number): unknown => {
  const steps = DELAY_SCALE.slice(1).flatMap((step, at) => [step.from, (2.6 + at * 0.55) * scale]);
  return strong(5.5 * scale, ["step", ["coalesce", ["get", "delayS"], 0], 2 * scale, ...steps]);
};

export const NEEDLE_LAYER = {
  id: "needles",
  type: "line",
  layout: { "line-cap": "butt", "line-sort-key": ["coalesce", ["get", "delayS"], -1] },
  paint: {
    "line-color": [
      "case",
      ["has", "delayS"],
      ["step", ["get", "delayS"], DELAY_SCALE[0].color, ...DELAY_SCALE.slice(1).flatMap((step) => [step.from, step.color])],
      NO_DATA_COLOR,
    ],
    "line-width": ["interpolate", ["linear"], ["zoom"], 11, byDelay(1), 14, byDelay(1.7), 17, byDelay(2.6)],
    "line-opacity": shown(1, 0),
  },
} as LayerProps;

export const DOT_LAYER = {
  id: "dots",
  type: "circle",
  paint: {
    "circle-radius": ["interpolate", ["linear"], ["zoom"], 11, shown(1.1, 1), 13, shown(2.2, 1.6), 15, shown(3.6, 2.6), 17, shown(6, 4.5)],
    "circle-color": ["case", ["has", "rank"], COLORS.sheet, NO_DATA_COLOR],
    "circle-stroke-width": ["interpolate", ["linear"], ["zoom"], 11, 0.7, 14, 1.4],
    "circle-stroke-color": shown(COLORS.ink, "#A9A393"),
  },
} as LayerProps;
