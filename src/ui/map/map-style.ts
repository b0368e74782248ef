import type { LayerProps } from "react-map-gl/maplibre";
import type { FilterSpecification, StyleSpecification } from "maplibre-gl";
import type { Sheet } from "./base-map";

/** Laid under the map by the page: a layer of it would be painted again in every frame. */
export const PAPER_COLOR = "#FBF9F2";

/** Empty: everything on the map comes from the city's own files. No glyphs address: labels are set in the page's fonts. */
export const EMPTY_STYLE: StyleSpecification = { version: 8, sources: {}, layers: [] };

const WATER = "#D9E3E6";
const SHORE = "#B4C6CC";
const PARK = "#E8EBD9";
const STREET = "#E4DAC6";

/** Metres on the ground to pixels would hide small streets: widths grow with the zoom by hand. */
const width = (atCity: number, atStreet: number): unknown => ["interpolate", ["exponential", 1.6], ["zoom"], 11, atCity, 17, atStreet];

const isOn = (sheet: Sheet, ...more: unknown[]) => ["all", ["==", ["get", "sheet"], sheet], ...more] as FilterSpecification;
const isKind = (kind: string) => isOn("water", ["==", ["get", "kind"], kind]);

const PARK_LAYER = { id: "parks", type: "fill", filter: isOn("parks"), paint: { "fill-color": PARK, "fill-antialias": false } } as LayerProps;
/** Its edges are drawn over by its banks, the sea's by the coast. */
const RIVER_LAYER = { id: "river", type: "fill", filter: isKind("river"), paint: { "fill-color": WATER, "fill-antialias": false } } as LayerProps;
const BANK_LAYER = { id: "banks", type: "line", filter: isKind("river"), paint: { "line-color": SHORE, "line-width": 1 } } as LayerProps;
/** Above the banks: where a river meets the sea its outline ends. */
const SEA_LAYER = { id: "sea", type: "fill", filter: isKind("sea"), paint: { "fill-color": WATER, "fill-antialias": false } } as LayerProps;
const COAST_LAYER = { id: "coast", type: "line", filter: isKind("coast"), paint: { "line-color": SHORE, "line-width": 1 } } as LayerProps;

const STREET_LAYER = {
  id: "streets",
  type: "line",
  filter: isOn("streets"),
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

const HALO = { "text-halo-color": PAPER_COLOR, "text-halo-width": 1.4 };

const STREET_NAME_LAYER = {
  id: "street-names",
  type: "symbol",
  filter: isOn("streets"),
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

const PLACE_NAME_LAYER = {
  id: "place-names",
  type: "symbol",
  filter: isOn("labels", ["in", ["get", "kind"], ["literal", ["district", "park"]]]),
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

const WATER_NAME_LAYER = {
  id: "water-names",
  type: "symbol",
  filter: isOn("labels", ["==", ["get", "kind"], "water"]),
  layout: { "text-field": ["get", "name"], "text-font": ["Barlow Italic"], "text-size": 14 },
  paint: { "text-color": "#587782", "text-halo-color": WATER, "text-halo-width": 1.2 },
} as LayerProps;

/** The ground, from below. */
export const GROUND_LAYERS: readonly LayerProps[] = [
  PARK_LAYER,
  RIVER_LAYER,
  BANK_LAYER,
  SEA_LAYER,
  COAST_LAYER,
  STREET_LAYER,
  STREET_NAME_LAYER,
  PLACE_NAME_LAYER,
  WATER_NAME_LAYER,
];
