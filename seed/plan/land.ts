import { isInside, smoothLine, type Point } from "../plane";

export const RIVER_NAME = "River Varn";
const RIVER_HALF_WIDTH_M = 75;

const RIVER: Point[] = [
  [-6200, 1500], [-5300, 700], [-4300, 150], [-3300, -280], [-2500, -560], [-1800, -760], [-900, -840], [0, -820],
  [700, -860], [1500, -1010], [2300, -1260], [3000, -1650], [3600, -2080], [4300, -2500], [4900, -2750],
];

/** Runs on far beyond the city, so that no map of it shows where the drawing ends. */
export const COAST: Point[] = [
  [26000, 30000], [15000, 19000], [10500, 11500], [8200, 7200], [7200, 5200], [6400, 3600], [5700, 2900], [5350, 2100], [5150, 1400], [4700, 900], [4550, 250], [4250, -500], [4150, -1300],
  [3750, -1950], [3400, -2350], [3000, -2650], [2650, -3300], [2300, -4000], [1700, -4650], [900, -5000], [200, -5300],
  [-400, -6200], [-1500, -7000], [-3600, -7900], [-6800, -8300], [-11000, -9600], [-18000, -14000], [-30000, -26000],
];

/** The river widens from upstream to the mouth. */
export function riverBanks(): Point[] {
  const line = smoothLine(RIVER, 80);
  const left: Point[] = [];
  const right: Point[] = [];
  line.forEach((point, i) => {
    const [a, b] = [line[Math.max(0, i - 1)], line[Math.min(line.length - 1, i + 1)]];
    const lengthM = Math.hypot(b[0] - a[0], b[1] - a[1]);
    const widthM = RIVER_HALF_WIDTH_M * (0.7 + (1.1 * i) / line.length) + 9 * Math.sin(i / 4);
    const [nx, ny] = [-(b[1] - a[1]) / lengthM, (b[0] - a[0]) / lengthM];
    left.push([point[0] + nx * widthM, point[1] + ny * widthM]);
    right.push([point[0] - nx * widthM, point[1] - ny * widthM]);
  });
  return [...left, ...right.reverse()];
}

export function seaRing(): Point[] {
  return [...smoothLine(COAST, 120), [40000, -26000], [40000, 30000]];
}

const RIVER_RING = riverBanks();
const SEA_RING = seaRing();

export function isWater(point: Point): boolean {
  return isInside(point, RIVER_RING) || isInside(point, SEA_RING);
}

export interface Park {
  name: string;
  ring: Point[];
}

function park(name: string, ring: Point[]): Park {
  return { name, ring: smoothLine(ring, 40, true) };
}

export const PARKS: Park[] = [
  park("Kittiwake Park", [[-1950, 640], [-1560, 560], [-1530, 850], [-1560, 1150], [-1740, 960]]),
  park("The Common", [[1060, 120], [1280, 180], [1560, 60], [1560, 560], [1150, 560], [1040, 380]]),
  park("Battery Gardens", [[-1900, -1600], [-1560, -1590], [-1350, -1720], [-1300, -1950], [-1560, -1900], [-1850, -1760]]),
  park("Northfield", [[120, 1780], [700, 1760], [760, 2000], [180, 2060]]),
  park("Saltmarsh Reserve", [[3050, -1050], [3800, -900], [4050, -1300], [3650, -1800], [3150, -1550]]),
  park("Gorse Hill", [[-3900, -500], [-3500, -620], [-3050, -480], [-3100, -900], [-3700, -980]]),
  park("Lighthouse Head", [[4300, 1700], [5050, 1650], [5350, 2300], [4700, 2250]]),
  park("Weir Meadow", [[-1900, -300], [-1500, -320], [-1230, -560], [-1500, -600], [-1900, -560]]),
];

export interface District {
  name: string;
  centre: Point;
}

/** A junction belongs to the nearest centre. */
export const DISTRICTS: District[] = [
  { name: "Old Town", centre: [-420, 650] },
  { name: "Harbourside", centre: [520, -60] },
  { name: "Priory", centre: [420, 1080] },
  { name: "Southbank", centre: [-150, -1900] },
  { name: "Shipyards", centre: [1300, -1950] },
  { name: "Northfield", centre: [200, 2350] },
  { name: "Foundry", centre: [-1500, 2050] },
  { name: "Westmoor", centre: [-2200, 500] },
  { name: "Lantern Hill", centre: [-2500, -1600] },
  { name: "Southmoor", centre: [-700, -3150] },
  { name: "Coastside", centre: [2700, 900] },
  { name: "Skerry", centre: [1900, 1950] },
  { name: "Eastgate", centre: [1900, -400] },
];
