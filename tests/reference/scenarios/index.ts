import { arterialBScenario, arterialScenario } from "./arterial";
import { compoundScenario } from "./compound";
import { drawnCityScenario } from "./drawn-city";
import { gridScenario } from "./grid";
import { mirrorScenario } from "./mirror";
import { oddScenario } from "./odd";
import { oddBScenario } from "./odd-b";
import { townScenario } from "./town";
import type { Scenario } from "./types";

const RANDOM_STREETS = [
  "--rand", "--rand.iterations", "62", "--rand.min-distance", "60", "--rand.max-distance", "240", "--rand.min-angle", "60",
  "--rand.num-tries", "60", "--rand.connectivity", "0.96",
];

const RING_STREETS = [
  "--spider", "--spider.arm-number", "7", "--spider.circle-number", "4", "--spider.space-radius", "150",
  "--perturb-x", "normc(0,28,-55,55)", "--perturb-y", "normc(0,28,-55,55)",
];

const SPOKE_STREETS = [
  "--spider", "--spider.arm-number", "5", "--spider.circle-number", "4", "--spider.space-radius", "175",
  "--perturb-x", "normc(0,22,-45,45)", "--perturb-y", "normc(0,22,-45,45)",
];

/** Scenarios to tune on. */
export const TUNING: Scenario[] = [
  gridScenario(),
  arterialScenario(),
  oddScenario(),
  compoundScenario(),
  townScenario({
    id: "town",
    title: "irregular town of bent streets, gaps and diagonals, the simulator's own drivers",
    seed: 404, columns: 6, rows: 4, spacingM: 190, jitterM: 42, gapShare: 0.18, diagonalShare: 0.35,
    perHour: 210, cycleS: 84, signalShare: 1, oneWayColumns: [], oneWayRows: [], vehicles: "default",
  }),
  mirrorScenario(
    townScenario({
      id: "left", title: "", seed: 505, columns: 4, rows: 4, spacingM: 230, jitterM: 55, gapShare: 0.12, diagonalShare: 0.3,
      perHour: 200, cycleS: 90, signalShare: 1, oneWayColumns: [], oneWayRows: [], vehicles: "calm",
    }),
    "left",
    "irregular town with left-hand driving",
  ),
  townScenario({
    id: "centre",
    title: "dense city centre: blocks of 70 to 130 m, one-way streets, every second crossing without a signal",
    seed: 919, columns: 7, rows: 6, spacingM: 98, jitterM: 22, gapShare: 0.12, diagonalShare: 0.12,
    perHour: 235, cycleS: 72, signalShare: 0.6, oneWayColumns: [2, 3], oneWayRows: [2, 3], vehicles: "default",
  }),
  drawnCityScenario({
    id: "drawn",
    title: "city drawn at random: bent streets of mixed widths and speeds, yards, buses, errands, people crossing, turns at red",
    seed: 1207, driveSide: "right", cycleS: 88, perLane: 78, perYard: 35, mainStreets: 5, fringeShare: 0, oneWayShare: 0.15, yardShare: 0.35,
    busLines: 4, vehicles: "calm", recordedShare: 1, draw: RANDOM_STREETS, signalFromMs: 50, walkersPerHour: 90,
    turnOnRedShare: 0.4, errandShare: 0.06,
  }),
  drawnCityScenario({
    id: "spokes",
    title: "city of five spokes and four rings drawn askew, with street ends all round, yards, buses, errands, people crossing, turns at red",
    seed: 2203, driveSide: "right", cycleS: 84, perLane: 140, perYard: 35, mainStreets: 4, fringeShare: 0.7, oneWayShare: 0.12, yardShare: 0.3,
    busLines: 3, vehicles: "default", recordedShare: 0.2, draw: SPOKE_STREETS, signalFromMs: 50, walkersPerHour: 80,
    turnOnRedShare: 0.35, errandShare: 0.06,
  }),
];

/** Kept aside while the core was tuned. */
export const HOLD_OUT: Scenario[] = [
  leftArterial(),
  oddBScenario(),
  leftCentre(),
  townScenario({
    id: "town-b",
    title: "another irregular town, denser and busier",
    seed: 818, columns: 5, rows: 5, spacingM: 160, jitterM: 34, gapShare: 0.14, diagonalShare: 0.25,
    perHour: 250, cycleS: 76, signalShare: 1, oneWayColumns: [], oneWayRows: [], vehicles: "calm",
  }),
  drawnCityScenario({
    id: "rings",
    title: "city of rings and radials drawn askew: bent streets of mixed widths and speeds, yards, buses, errands, people crossing",
    seed: 1311, driveSide: "left", cycleS: 80, perLane: 150, perYard: 35, mainStreets: 5, fringeShare: 0.75, oneWayShare: 0.12, yardShare: 0.3,
    busLines: 4, vehicles: "default", recordedShare: 0.2, draw: RING_STREETS, signalFromMs: 50, walkersPerHour: 90,
    turnOnRedShare: 0.3, errandShare: 0.06,
  }),
];

function leftCentre(): Scenario {
  const options = {
    id: "centre-left", title: "", seed: 1021, columns: 6, rows: 6, spacingM: 105, jitterM: 26, gapShare: 0.15, diagonalShare: 0.15,
    perHour: 200, cycleS: 80, signalShare: 0.65, oneWayColumns: [2, 3], oneWayRows: [0, 3], vehicles: "calm" as const,
  };
  return mirrorScenario(townScenario(options), "centre-left", "dense city centre with one-way streets, left-hand driving");
}

function leftArterial(): Scenario {
  const { scenario, bays } = arterialBScenario();
  return mirrorScenario(scenario, "arterial-left", "arterial with bays and skewed side streets, left-hand driving", bays);
}
