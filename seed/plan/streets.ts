import { smoothLine, type Point } from "../plane";
import { gridStreets } from "./grid";

export const STREET_CLASSES = ["ring", "arterial", "street", "oneway", "local"] as const;
export type StreetClass = (typeof STREET_CLASSES)[number];

export interface Street {
  name: string;
  class: StreetClass;
  /** Runs closed on itself. */
  isClosed: boolean;
  /** Centreline in city metres; one-way streets run in the direction of the line. */
  line: Point[];
}

function street(name: string, streetClass: StreetClass, points: Point[], isClosed = false): Street {
  return { name, class: streetClass, isClosed, line: smoothLine(points, 25, isClosed) };
}

const RING: Point[] = [
  [0, 2150], [850, 2080], [1650, 1750], [2350, 1150], [2700, 350], [2720, -500], [2480, -1330], [2050, -2250],
  [1350, -2950], [450, -3280], [-500, -3240], [-1400, -2900], [-2150, -2250], [-2620, -1450], [-2780, -600],
  [-2720, 250], [-2380, 1080], [-1700, 1720], [-850, 2080],
];

const RADIALS: Street[] = [
  street("North Road", "arterial", [[-25, 1180], [-60, 1650], [-40, 2150], [60, 2700], [30, 3250], [120, 3900]]),
  street("Skerry Road", "arterial", [[1105, 1075], [1165, 1420], [1280, 1750], [1500, 2030], [1900, 2350], [2500, 2760], [3150, 3150]]),
  street("Coast Road", "arterial", [[1060, 640], [1500, 700], [2000, 760], [2580, 780], [3150, 900], [3700, 1180], [4250, 1300]]),
  street("Beacon Road", "arterial", [[1000, 200], [1300, 60], [1650, -40], [2200, -120], [2730, -120], [3300, -60], [3900, -250]]),
  street("Westmoor Road", "arterial", [[-950, 350], [-1450, 420], [-2000, 520], [-2640, 560], [-3250, 700], [-3900, 760], [-4500, 900]]),
  street("Foundry Road", "arterial", [[-800, 1345], [-1010, 1530], [-1350, 1780], [-1800, 2200], [-2350, 2600], [-2900, 3100]]),
  street("Southmoor Road", "arterial", [[-350, -2560], [-380, -2900], [-420, -3250], [-350, -3750], [-430, -4300]]),
  street("Kelp Road", "arterial", [[-1200, -2050], [-1650, -2200], [-2130, -2290], [-2700, -2500], [-3300, -2620], [-3900, -2850]]),
  street("Tidewater Road", "arterial", [[590, -2350], [850, -2770], [1130, -3080], [1420, -3420], [1600, -3800]]),
  street("Lantern Road", "arterial", [[-1220, -1640], [-1650, -1530], [-2150, -1350], [-2640, -1260], [-3250, -1150], [-3850, -1230], [-4400, -1100]]),
];

const CONNECTORS: Street[] = [
  street("Inner Circle North", "street", [[-2000, 560], [-1830, 950], [-1420, 1350], [-900, 1620], [-50, 1690], [800, 1580], [1480, 1230], [1850, 760], [1960, 350], [1990, -60], [1960, -640]]),
  street("Inner Circle South", "street", [[-2120, -1340], [-1980, -1800], [-1700, -2240], [-1150, -2650], [-380, -2890], [500, -2860], [1000, -2560], [1420, -2000], [1700, -1500]]),
  street("Heron Way", "street", [[-1980, 540], [-2040, 130], [-2060, -60]]),
  street("Sailmaker Avenue", "street", [[-2380, 2580], [-1750, 2680], [-1050, 2850], [50, 2990], [900, 2820], [1700, 2560], [2150, 2560]]),
  street("Wrack Lane", "street", [[-3250, 720], [-3180, 1250], [-2850, 1750], [-2330, 2120], [-1820, 2200]]),
  street("Cormorant Way", "street", [[3300, -60], [3340, 420], [3200, 930], [3050, 1500], [2700, 2050], [2270, 2520]]),
  street("Limpet Lane", "street", [[-3250, -1140], [-3350, -1750], [-3310, -2200], [-3290, -2640], [-2800, -3050], [-2050, -3250], [-1300, -3450], [-390, -3650], [500, -3760], [1290, -3290]]),
  street("Saltpan Lane", "street", [[-3240, 690], [-3420, 250], [-3460, -60]]),
  street("Fulmar Street", "local", [[-1830, 960], [-2210, 1130], [-2520, 1240], [-2830, 1420], [-3060, 1500]]),
  street("Gannet Street", "local", [[-900, 1610], [-920, 2070], [-980, 2480], [-1050, 2870]]),
  street("Dunlin Street", "local", [[720, 1610], [830, 2080], [880, 2430], [900, 2840]]),
  street("Turnstone Street", "local", [[1480, 1220], [1940, 1560], [2350, 1800], [2800, 2000]]),
  street("Plover Street", "local", [[1960, 340], [2700, 350], [3330, 420]]),
  street("Sandpiper Street", "local", [[-1130, -2640], [-1390, -2910], [-1640, -3120], [-1900, -3310]]),
  street("Whimbrel Street", "local", [[500, -2840], [450, -3280], [480, -3790]]),
  street("Avocet Street", "local", [[-1990, -1800], [-2410, -1850], [-2900, -1900], [-3370, -1920]]),
  street("Dock Approach", "street", [[690, -1610], [1050, -1700], [1500, -1720], [2050, -1700], [2480, -1480]]),
  street("Creel Street", "street", [[1400, -2020], [1050, -2080], [700, -2160]]),
  street("Rope Walk", "street", [[-1200, -2050], [-1500, -1980], [-1990, -1790]]),
  street("Strand West", "arterial", [[-1000, -112], [-1500, -130], [-2060, -60], [-2730, 90]]),
  street("Strand East", "arterial", [[900, -385], [1400, -520], [1950, -640], [2700, -780]]),
  street("Embankment", "street", [[-1490, -130], [-1180, -400], [-520, -570], [200, -560], [620, -590], [1000, -620], [1390, -520]]),
  street("Sluice Road", "street", [[-1640, -1530], [-1200, -1200], [-520, -1110], [100, -1080], [600, -1130], [1010, -1350], [1060, -1700]]),
  street("Bollard Street", "local", [[1640, -50], [1600, -300], [1620, -580]]),
  street("Petrel Lane", "street", [[-35, 2150], [250, 2480], [560, 2560], [885, 2440]]),
  street("Curlew Lane", "street", [[-2640, -1260], [-2920, -1620], [-3340, -1750]]),
  street("Thrift Lane", "street", [[2728, -120], [3020, 130], [3340, 250]]),
  street("Samphire Street", "local", [[-3420, 260], [-3050, 330], [-2720, 250]]),
  street("Eider Street", "local", [[-1450, 420], [-1420, 110], [-1500, -130]]),
  street("Pennant Street", "local", [[-1550, 2680], [-1500, 2250], [-1350, 1780]]),
  street("Marram Street", "street", [[3660, 1160], [3720, 500], [3640, -180]]),
  street("Windlass Street", "local", [[1650, -40], [1690, 340], [1660, 720]]),
  street("Halyard Street", "local", [[-1450, 420], [-1480, 850], [-1440, 1330]]),
  street("Spindrift Road", "local", [[1480, 1225], [1530, 980], [1500, 700]]),
  street("Barnacle Row", "local", [[-480, 1690], [-320, 1490], [-50, 1450], [380, 1450], [720, 1600]]),
];

const NORTH_CORE = gridStreets({
  origin: [80, 420], angleDeg: 8, bendM: 28,
  avenues: [
    { at: -1010, name: "Tanner Street", class: "street" },
    { at: -780, name: "Cooper Street", class: "oneway", from: -930 },
    { at: -575, name: "Chandler Street", class: "oneway", isReversed: true },
    { at: -370, name: "Bridge Street", class: "arterial", from: -1990 },
    { at: -165, name: "Chapel Row", class: "street" },
    { at: 55, name: "Market Street", class: "street", from: -1010 },
    { at: 265, name: "Weaver Street", class: "oneway" },
    { at: 470, name: "Fisher Street", class: "oneway", isReversed: true },
    { at: 690, name: "Harbour Road", class: "arterial", from: -2330 },
    { at: 930, name: "Mariner Street", class: "street", from: -920 },
  ],
  rows: [
    { at: -680, name: "Quay Street", class: "street" },
    { at: -480, name: "Custom House Lane", class: "oneway" },
    { at: -285, name: "Mill Lane", class: "oneway", isReversed: true },
    { at: -75, name: "Corn Street", class: "street" },
    { at: 145, name: "High Street", class: "street" },
    { at: 365, name: "Orchard Way", class: "street" },
    { at: 575, name: "Lighthouse Avenue", class: "arterial" },
    { at: 790, name: "Priory Street", class: "street" },
  ],
});

const SOUTH_BANK = gridStreets({
  origin: [-280, -1900], angleDeg: -9, bendM: 22,
  avenues: [
    { at: -900, name: "Oakum Street", class: "street" },
    { at: -640, name: "Bosun Street", class: "street" },
    { at: -370, name: "Capstan Street", class: "street" },
    { at: -90, name: "Ferry Road", class: "arterial" },
    { at: 190, name: "Anchor Street", class: "street", to: 820 },
    { at: 470, name: "Keel Street", class: "street", to: 830 },
    { at: 990, name: "Tiller Street", class: "street", to: 180 },
  ],
  rows: [
    { at: -640, name: "Almshouse Lane", class: "street" },
    { at: -390, name: "Kiln Lane", class: "street" },
    { at: -130, name: "Shipwright Road", class: "arterial" },
    { at: 140, name: "Brewer Gate", class: "street" },
    { at: 400, name: "South Quay", class: "street", to: 920 },
  ],
});

export const STREETS: Street[] = [
  street("Ring Road", "ring", RING, true),
  ...RADIALS,
  ...NORTH_CORE,
  ...SOUTH_BANK,
  ...CONNECTORS,
];
